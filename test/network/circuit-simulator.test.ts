import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { solveNetwork } from '../../solver/network/solve-network.ts';
import type { NetworkSpec } from '../../solver/network/spec.ts';
import { verify } from '../verify/row.ts';
import { apart, randomNetwork, UNIT } from './random-network.ts';

const PROGRAM = 'ngspice';
const present = spawnSync(PROGRAM, ['--version']).status === 0;

/** Pressure as voltage, flow × UNIT as current, resistance / UNIT as ohm. */
function cards(spec: NetworkSpec, tag: string): string[] {
  const node = (i: number) => `${tag}_${i}`;
  const lines: string[] = [];
  spec.resistance.forEach((r, e) => {
    lines.push(`R${tag}_${e} ${node(spec.ductFrom[e])} ${node(spec.ductTo[e])} ${r / UNIT}`);
  });
  spec.blocks.forEach(({ nodes, matrix }, b) => {
    // A current drawn from node i to earth for every voltage, by the matrix as it stands.
    nodes.forEach((i, r) => {
      nodes.forEach((j, c) => {
        lines.push(`G${tag}_${b}_${r}_${c} ${node(i)} 0 ${node(j)} 0 ${matrix[r * nodes.length + c] * UNIT}`);
      });
    });
  });
  spec.drives.forEach(({ node: at, kind, value, series }, d) => {
    if (kind === 'flow') {
      lines.push(`I${tag}_${d} 0 ${node(at)} ${value * UNIT}`);
    } else if (series > 0) {
      lines.push(`V${tag}_${d} ${tag}_far${d} 0 ${value}`);
      lines.push(`RT${tag}_${d} ${tag}_far${d} ${node(at)} ${series / UNIT}`);
    } else {
      lines.push(`V${tag}_${d} ${node(at)} 0 ${value}`);
    }
  });
  return lines;
}

/** Values of the operating point by lower-case name, all circuits in one run. */
function operatingPoint(lines: readonly string[]): Map<string, number> {
  const folder = mkdtempSync(join(tmpdir(), 'networks-'));
  try {
    const deck = join(folder, 'networks.cir');
    const raw = join(folder, 'networks.raw');
    writeFileSync(
      deck,
      [
        '* networks',
        ...lines,
        '.control',
        'set filetype=ascii',
        'set numdgt=16',
        'op',
        `write ${raw}`,
        'quit',
        '.endc',
        '.end',
        '',
      ].join('\n'),
    );
    execFileSync(PROGRAM, ['-b', deck], { stdio: 'pipe' });
    const text = readFileSync(raw, 'utf8');
    const names = [
      ...text.slice(text.indexOf('Variables:'), text.indexOf('Values:')).matchAll(/^\s*\d+\s+(\S+)\s/gm),
    ].map(([, name]) => name);
    const values = text
      .slice(text.indexOf('Values:') + 7)
      .trim()
      .split(/\s+/)
      .slice(1)
      .map(Number);
    return new Map(names.map((name, k) => [name.toLowerCase(), values[k]]));
  } finally {
    rmSync(folder, { recursive: true });
  }
}

if (present) {
  verify(
    {
      quantity: 'network: pressures and drive flows, over the largest of each',
      check: 'package',
      at: '100 random networks as electric circuits',
      source: 'ngspice, operating point',
      tolerance: 5e-11,
    },
    () => {
      const specs = Array.from({ length: 100 }, (_, seed) => randomNetwork(seed));
      const found = operatingPoint(specs.flatMap((spec, k) => cards(spec, `n${k}`)));
      let worst = 0;
      specs.forEach((spec, k) => {
        const got = solveNetwork(spec);
        const voltage = (name: string) => found.get(`v(${name})`) ?? found.get(name) ?? Number.NaN;
        const pressures = Array.from(got.pressure, (_, i) => voltage(`n${k}_${i}`));
        const flows = spec.drives.map(({ kind, value }, d) =>
          kind === 'flow' ? value : -(found.get(`i(vn${k}_${d})`) ?? Number.NaN) / UNIT,
        );
        for (const off of [apart(got.pressure, pressures), apart(got.driveFlow, flows)]) {
          if (!(off <= worst)) worst = off;
        }
      });
      return worst;
    },
  );
} else {
  test('random networks as electric circuits: not compared, ngspice is absent', () => {
    console.warn(
      'ngspice is not installed: the networks were not compared with it (Debian: apt install ngspice).',
    );
    expect(process.env.CI, 'ngspice must be present in continuous integration').toBeFalsy();
  });
}
