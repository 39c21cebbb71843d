import { expect, test } from 'vitest';
import { channel, chipOf, describeGraph, port } from '../../test/chip/drawings.ts';
import { readGraph } from './read-graph.ts';

const main = channel('a', [
  [0, 0],
  [2000, 0],
]);

test('two crossing channels are one junction of four arms', () => {
  const graph = readGraph(
    chipOf({
      channels: [
        main,
        channel('b', [
          [1000, -1000],
          [1000, 1000],
        ]),
      ],
      ports: [port('in', [0, 0]), port('out', [2000, 0], 200)],
    }),
  );
  expect(describeGraph(graph)).toEqual([
    'a#1 port:in junction:1 1000',
    'a#2 junction:1 port:out 900',
    'b#1 end:1 junction:1 1000',
    'b#2 junction:1 end:2 1000',
  ]);
});
