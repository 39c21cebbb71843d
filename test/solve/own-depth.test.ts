import { describe, expect, test } from 'vitest';
import type { Chip } from '../../solver/chip/chip.ts';
import { readDescription } from '../../solver/chip/description.ts';
import { solve } from '../../solver/solve.ts';

/** A tee on a layer of a depth, with depths of its arms' own where given; µm. */
const tee = (layer: number, own: readonly (number | undefined)[] = []): Chip =>
  readDescription(
    JSON.stringify({
      format: 'channelwright-chip',
      version: 1,
      name: 'tee',
      outline: { width: 40000, height: 26000 },
      layers: [{ id: 'flow', depth: layer, fillet: 20 }],
      channels: [
        {
          id: 'feed',
          layer: 'flow',
          path: [
            [10000, 12000],
            [12000, 12000],
          ],
          width: 200,
          depth: own[0],
        },
        {
          id: 'up',
          layer: 'flow',
          path: [
            [12000, 12000],
            [12000, 13500],
          ],
          width: 150,
          depth: own[1],
        },
        {
          id: 'down',
          layer: 'flow',
          path: [
            [12000, 12000],
            [12000, 11000],
          ],
          width: 120,
          depth: own[2],
        },
      ],
      ports: [
        { id: 'in', at: [10000, 12000], layer: 'flow', drive: { pressure: 100 } },
        { id: 'top', at: [12000, 13500], layer: 'flow', drive: { pressure: 0 } },
        { id: 'bottom', at: [12000, 11000], layer: 'flow', drive: { pressure: 0 } },
      ],
      fluid: { viscosity: '1 mPa.s', density: 1000 },
    }),
  );

describe('a junction of channels with depths of their own', () => {
  test('that share one is solved at it, as on a layer of that depth', () => {
    const [own, layer] = [solve(tee(100, [60, 60, 60])), solve(tee(60))];
    expect(own.ports).toEqual(layer.ports);
    expect(own.cells[0]!.portMatrix).toEqual(layer.cells[0]!.portMatrix);
    expect(own.cells[0]!.peakWallShear).toBe(layer.cells[0]!.peakWallShear);
    expect(own.findings.filter(({ kind }) => kind === 'mixed-depths')).toEqual([]);
  });

  test('that differ is solved between them, with the doubt said and in every band', () => {
    const mixed = solve(tee(60, [100]));
    // the mean of 60 and 100 µm is 77.46 µm: (100/77.46)³ − 1
    const off = (100 / 77.46) ** 3 - 1;
    const [found] = mixed.findings.filter(({ kind }) => kind === 'mixed-depths');
    expect(found).toMatchObject({ where: 'junction:1', severity: 'warn' });
    expect(found!.value).toBeCloseTo(off, 3);
    expect(found!.says).toMatch(/different depths meet in junction:1/);
    const same = solve(tee(60));
    expect(mixed.bands!.flow).toBeGreaterThan(5 * same.bands!.flow);
    expect(mixed.cells[0]!.band!.shear).toBeGreaterThan(same.cells[0]!.band!.shear + (2 / 3) * off);
  });
});
