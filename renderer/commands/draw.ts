import type { Desk } from '../state/desk.ts';
import type { Workbench } from '../state/workbench.ts';
import type { ToolName } from '../tools/tool.ts';
import type { Command } from './command.ts';

const TOOLS: readonly (readonly [ToolName, string, string, string])[] = [
  [
    'select',
    'Select',
    's',
    'Choose and move parts; drag a box to choose many. Alt or Ctrl holds snapping off.',
  ],
  [
    'channel',
    'Channel',
    'c',
    'Draw a channel point by point; type a length, an angle, a width at any moment. Alt or Ctrl holds snapping off.',
  ],
  ['chamber', 'Chamber', 'h', 'Draw a chamber; the key again changes from rectangle to round to polygon.'],
  ['port', 'Port', 'p', 'Set a port: click, or type its place.'],
  ['via', 'Via', 'v', 'Set a via between two layers.'],
  ['serpentine', 'Serpentine', 'r', 'Draw a box; a serpentine of the wanted length is laid into it.'],
  [
    'split tree',
    'Split tree',
    't',
    'Draw a box; a tree of 2, 4, 8 … equal paths is laid into it, with ports and targets.',
  ],
  ['gradient tree', 'Gradient tree', 'g', 'Draw a box; a tree that makes graded mixtures is laid into it.'],
  ['row of chambers', 'Row of chambers', 'w', 'Draw a box; equal chambers in a row are laid into it.'],
  ['posts', 'Posts', 'o', 'Draw a box; a row of filter posts is laid across it.'],
  [
    'keep-out',
    'Keep-out',
    'd',
    'Draw a part of the chip that is to stay clear; the key again changes from rectangle to round to polygon.',
  ],
  ['measure', 'Measure', 'm', 'Measure between two places.'],
];

export const drawCommands = (desk: Desk, bench: Workbench): Command[] =>
  TOOLS.map(([name, title, key, help]) => ({
    id: `tool ${name}`,
    title,
    keys: [key],
    help,
    group: 'Draw',
    why: () => (desk.chip() ? null : 'Open or begin a chip first.'),
    run: () => {
      const areas = name === 'chamber' || name === 'keep-out';
      if (areas && desk.view.get().tool === name) bench.event({ kind: 'again' });
      else bench.take(name);
    },
  }));
