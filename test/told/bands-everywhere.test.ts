import { describe, expect, test } from 'vitest';
import { reportText } from '../../main/cli/report.ts';
import { resultCsv } from '../../main/export/csv-result.ts';
import type { Table } from '../../main/export/note/blocks.ts';
import { limitsTable, routesTable } from '../../main/export/note/routes.ts';
import { splitTable } from '../../main/export/note/split.ts';
import { tableOf } from '../../renderer/ledger/tables.ts';
import { legsOf, peaksAlong, profileOf } from '../../renderer/plots/route.ts';
import { answersOf } from '../../renderer/plots/sweep-answers.ts';
import { shown, spanOn } from '../../renderer/sheet/overlay.ts';
import { placeWords, portWords } from '../../renderer/sheet/words.ts';
import { plainText } from '../../renderer/verdict/answer.ts';
import { verdicts } from '../../renderer/verdict/verdicts.ts';
import { readDescription } from '../../solver/chip/description.ts';
import type { Result } from '../../solver/chip/result.ts';
import { solve } from '../../solver/solve.ts';

/** A tee with a target and limits, one of them missed; µm. */
const chip = readDescription(
  JSON.stringify({
    format: 'channelwright-chip',
    version: 1,
    name: 'tee',
    outline: { width: 40000, height: 26000 },
    layers: [{ id: 'flow', depth: 100, fillet: 20 }],
    channels: [
      {
        id: 'feed',
        layer: 'flow',
        path: [
          [5000, 12000],
          [20000, 12000],
        ],
        width: 200,
      },
      {
        id: 'up',
        layer: 'flow',
        path: [
          [20000, 12000],
          [20000, 17000],
        ],
        width: 150,
      },
      {
        id: 'down',
        layer: 'flow',
        path: [
          [20000, 12000],
          [20000, 8000],
        ],
        width: 120,
      },
    ],
    ports: [
      { id: 'in', at: [5000, 12000], layer: 'flow', drive: { flow: '5 uL/min' } },
      { id: 'top', at: [20000, 17000], layer: 'flow', drive: { pressure: 0 } },
      { id: 'bottom', at: [20000, 8000], layer: 'flow', drive: { pressure: 0 } },
    ],
    fluid: { viscosity: '1 mPa.s', density: 1000 },
    targets: [{ port: 'top', share: 0.5, within: '40 %' }],
    limits: [
      { name: 'gentle', shear: '0.1 Pa', cellDiameter: '15 um' },
      { name: 'blood', law: { constant: 3.62e-5, stress: 2.416, time: 0.785 }, damage: '1 %', passes: 1 },
    ],
  }),
);
const result = solve(chip, { accuracy: 0.01 });
const plain = (text: string): string => text.replaceAll('\u00a0', ' ');
const PLUS_MINUS = /± [\d.]+(e-\d+)? %/;

describe('each share and each wall shear bears its band', () => {
  test('in the result itself', () => {
    const banded = JSON.parse(JSON.stringify(result)) as Result;
    for (const { flow, band } of banded.ports) if (flow! < 0) expect(band!.share).toBeGreaterThan(0);
    // what flows in the feed is imposed, and its section is known to all digits: there is nothing to tell
    for (const { id, pieces } of banded.channels)
      for (const { band } of pieces) expect(band!.shear > 1e-9).toBe(id !== 'feed');
    for (const { band, peakError } of banded.cells) expect(band!.shear).toBeGreaterThan(peakError!);
    for (const { band, damage } of banded.routes) {
      for (const key of ['share', 'time', 'shear', 'wall'] as const) expect(band![key]).toBeGreaterThan(0);
      // what the law makes of stress and time, and no less than either
      for (const entry of damage) expect(entry.band).toBeGreaterThan(2.4 * band!.shear);
      expect(band!.wall).toBeGreaterThanOrEqual(band!.shear);
    }
    for (const { band } of banded.targets) expect(band).toBeGreaterThan(0);
    for (const { band } of banded.limits) expect(band).toBeGreaterThan(0);
  });

  test('paths followed in a rounded pattern of flow are told to be', () => {
    const [route] = result.routes;
    const most = 2 ** (1 / 32) - 1;
    const rounding = route!.band!.wall - Math.max(route!.band!.time, route!.band!.shear);
    expect(rounding).toBeGreaterThan(0);
    expect(rounding).toBeLessThanOrEqual((1 + most) ** 2 - 1 + 1e-12);
  });

  test('in the verdicts', () => {
    const [split, cells, , , trust] = verdicts({ chip, result, trouble: '' }).map((answer) =>
      plain(plainText(answer.says)),
    );
    expect(split).toMatch(PLUS_MINUS);
    expect(cells).toMatch(PLUS_MINUS);
    expect(trust).toMatch(/Splits within [\d.]+ %, wall shear within [\d.]+ %/);
    const free = verdicts({ chip: { ...chip, limits: [], targets: [] }, result, trouble: '' });
    expect(plain(plainText(free[1]!.says))).toMatch(
      new RegExp(`highest wall shear is .*${PLUS_MINUS.source}`),
    );
  });

  test('on the sheet: at ports, along channels, at the place of a missed limit', () => {
    const words = new Map(portWords(chip, result).map(({ name, figure }) => [name, plain(figure)]));
    expect(words.get('top')).toMatch(PLUS_MINUS);
    expect(words.get('bottom')).toMatch(PLUS_MINUS);
    const [missed] = placeWords(chip, result, () => [0, 0]);
    expect(plain(missed!.head)).toMatch(PLUS_MINUS);
    for (const overlay of ['share', 'wall shear'] as const) {
      const painted = shown(overlay, chip, result);
      for (const id of ['up', 'down']) expect(spanOn(painted, id, 0, 1e9)!.band, overlay).toBeGreaterThan(0);
    }
  });

  test('in the tables of the ledger, beside their figure', () => {
    const tables = ['ports', 'channels', 'routes', 'junctions'] as const;
    for (const tab of tables) {
      const { columns, rows } = tableOf(tab, chip, result, null);
      const heads = columns.map(({ head }) => head);
      const pairs = [
        ['share', '± share'],
        ['peak shear', '± shear'],
      ] as const;
      for (const [figure, band] of pairs) {
        const at = heads.indexOf(figure);
        if (at < 0) continue;
        expect(heads[at + 1], `${tab}: ${figure}`).toBe(band);
        for (const row of rows) expect(row.cells, tab).toHaveLength(columns.length);
      }
    }
    const { columns, rows } = tableOf('channels', chip, result, null);
    const at = columns.findIndex(({ head }) => head === '± shear');
    for (const row of rows) if (row.cells[0] !== 'feed') expect(row.cells[at]).toBeGreaterThan(0);
    // what is marked as missed is the shear itself
    expect(rows.flatMap(({ missed = [] }) => missed.map((i) => columns[i]!.head))).toContain('peak shear');
  });

  test('in the plots', () => {
    const legs = legsOf(result, 'in', 'top');
    const { bands: along, names } = profileOf(result, legs);
    for (const [i, band] of along.entries()) expect(band! > 1e-9).toBe(names[i] !== 'feed');
    for (const { band } of peaksAlong(result, legs)) expect(band).toBeGreaterThan(0);
    const { bands } = answersOf({ ok: true, result });
    expect(bands!.off).toBeGreaterThan(0);
    expect(bands!.shear).toBeGreaterThan(0);
  });

  test('on the command line and in its table', () => {
    const text = reportText(chip, result, 200);
    const section = (head: string): string => text.split('\n\n').find((block) => block.startsWith(head))!;
    for (const head of ['Ports', 'Channels', 'Routes', 'Damage', 'Targets', 'Limits'])
      expect(section(head), head).toMatch(/±/);
    const [heads, ...rows] = resultCsv(result, () => true)
      .trim()
      .split('\r\n')
      .map((row) => row.split(','));
    const column = (name: string): number => heads!.findIndex((head) => head.startsWith(name));
    for (const row of rows) {
      const band = row[0] === 'piece' ? '± wall shear' : row[0] === 'route' ? '± wall shear' : '± ';
      expect(Number(row[column(band)]), row.join()).toBeGreaterThanOrEqual(0);
    }
  });

  test('in the note', () => {
    const heads = ({ columns }: Table): string[] => columns.map(({ head }) => head.replaceAll('\u00a0', ' '));
    expect(heads(splitTable(chip, result))).toContain('numerics ±');
    expect(heads(routesTable(result))).toEqual(
      expect.arrayContaining(['share ±', 'time ±', 'shear ±', 'wall ±']),
    );
    expect(heads(limitsTable(chip, result))).toContain('numerics ±');
  });
});
