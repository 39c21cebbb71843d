import { expect, test } from 'vitest';
import { applyEdit } from '../../solver/chip/edit.ts';
import { readEdit } from '../../solver/chip/edit-read.ts';
import { solve } from '../../solver/solve.ts';
import { chipOf, ends, line } from '../../test/checks/chips.ts';
import { remedyOf } from '../edits/remedy.ts';
import { toEdit } from '../edits/to-edit.ts';
import { verdictChanges } from './verdict-changes.ts';

const thin = chipOf({
  process: { kind: 'film-mask' },
  channels: [line('a', 12000, 20)],
  ports: ends('a', 12000, '10 nL/min'),
  layers: [{ id: 'flow', depth: 20 }],
});
const before = solve(thin, { junctions: 'ideal' });

test('what the button does is what the remedy says', () => {
  for (const { remedy } of before.findings) {
    if (!remedy) continue;
    const edit = toEdit(thin, remedyOf(remedy, thin.layers));
    expect(applyEdit(thin, edit)).toEqual(applyEdit(thin, readEdit(remedy)));
  }
  expect(before.findings.filter(({ remedy }) => remedy).length).toBeGreaterThan(0);
});

test('a remedy on a layer goes by the layers', () => {
  const roof = { modulus: 2e6, thickness: 5e-3, poisson: 0.5 };
  const part = { ...thin.layers[0]!, roof };
  const remedy = {
    label: 'give layer flow a roof',
    changes: [{ kind: 'put', list: 'layers', id: 'flow', part }],
  };
  expect(applyEdit(thin, toEdit(thin, remedyOf(remedy, thin.layers))).layers[0]!.roof).toEqual(roof);
});

test('what else changes is counted from both results', () => {
  const remedy = before.findings.find(({ kind }) => kind === 'least-width')!.remedy!;
  const after = solve(applyEdit(thin, readEdit(remedy)), { junctions: 'ideal' });
  expect(verdictChanges(thin, before, after)).toBe(
    'No flow at a port changes by a thousandth. Findings of weight: 0, 1 before.',
  );
  const faster = { ...after, ports: after.ports.map((port) => ({ ...port, flow: port.flow! * 1.1 })) };
  expect(verdictChanges(thin, before, faster)).toContain('changes by');
});
