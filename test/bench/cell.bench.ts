import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import { canonical } from '../../solver/cell/canonical.ts';
import type { CellSolution } from '../../solver/cell/cell.ts';
import { relativeDifference } from '../../solver/cell/difference.ts';
import { fieldsOf, levelOf, solveLevel } from '../../solver/cell/level.ts';
import { peakOfFields } from '../../solver/cell/peak.ts';
import { planMesh } from '../../solver/cell/plan-mesh.ts';
import type { CellShape } from '../../solver/cell/shape.ts';
import { solveCell } from '../../solver/cell/solve-cell.ts';
import { memoryStore } from '../../solver/cell/store.ts';
import { warmUp } from '../../solver/cell/warm-up.ts';
import { plausibleJunction } from '../cell/random-junction.ts';
import { tee } from '../cell/shapes.ts';
import { type BenchRow, timed } from './row.ts';

const percent = (share: number): string => `${(100 * share).toPrecision(2)} %`;

/** Mean of the processor time of `work`, ms: what other programs on the machine leave alone. */
function processor(work: () => void, runs: number): number {
  const before = process.cpuUsage();
  for (let i = 0; i < runs; i += 1) work();
  const { user, system } = process.cpuUsage(before);
  return (user + system) / 1000 / runs;
}

/** Port matrix of the sharp T on a far finer mesh. */
const reference = (shape: CellShape): Float64Array =>
  solveLevel(levelOf(planMesh(canonical(shape).shape, 0.35, '', 1e5), shape.faces), 4, 1e-9).matrix;

/** Error of a solution, in the frame of the solved copy. */
function trueError(shape: CellShape, found: CellSolution, exact: Float64Array): number {
  const n = shape.faces;
  const [{ face, scale }] = found.placements;
  const matrix = Float64Array.from({ length: n * n }, (_, i) => {
    const [a, b] = [Math.floor(i / n), i % n];
    return found.portMatrix[face[a]! * n + face[b]!]! / scale ** 3;
  });
  return relativeDifference(matrix, exact, n);
}

export default async function run(): Promise<BenchRow[]> {
  const rows: BenchRow[] = [];
  const first = performance.now();
  solveCell(tee(0.5));
  rows.push({
    what: 'first cell after start, nothing compiled',
    median: performance.now() - first,
    unit: 'ms',
    runs: 1,
    target: 400,
  });
  warmUp(20);

  const shape = tee(0.5);
  const exact = reference(shape);
  let ours = { ms: Number.NaN, error: Number.NaN };
  for (const [asked, target] of [
    [0.003, 16],
    [0.001, 50],
  ] as const) {
    const accuracy = { flow: asked, peak: null };
    const found = solveCell(shape, accuracy);
    const median = timed(() => void solveCell(shape, accuracy), 25, 10);
    const cpu = processor(() => void solveCell(shape, accuracy), 25);
    if (asked === 0.003) ours = { ms: cpu, error: trueError(shape, found, exact) };
    rows.push({
      what: `T, depth/width 0.5, to ${percent(asked)}, mesh, both patterns and error bound`,
      median,
      unit: 'ms',
      runs: 25,
      target,
      note: `${cpu.toPrecision(3)} ms of processor; bound ${percent(found.flowError)}, true error ${percent(trueError(shape, found, exact))}`,
    });
  }

  const filleted = tee(0.5, 0.1);
  const sharpest = { flow: 0.005, peak: 0.01 };
  const peaks = solveCell(filleted, sharpest);
  const fine = fieldsOf(
    solveLevel(levelOf(planMesh(canonical(filleted).shape, 0.4, '', 1e5, 24), 3), 6, 1e-8),
  );
  const miss = Math.max(
    ...[0, 1, 2].map((face) => Math.abs(peakOfFields(peaks.fields!, face) / peakOfFields(fine, face) - 1)),
  );
  rows.push({
    what: 'T with fillets of 0.1 width, peak wall shear to 1 %',
    median: timed(() => void solveCell(filleted, sharpest), 9, 3),
    unit: 'ms',
    runs: 9,
    target: 300,
    note: `${processor(() => void solveCell(filleted, sharpest), 9).toPrecision(3)} ms of processor; bound ${percent(peaks.peakError!)}, true error ${percent(miss)}`,
  });

  rows.push(...(await chip()));
  rows.push(memory());
  rows.push(freefem(shape, exact, ours));
  return rows;
}

/** 200 junctions of 3 or 4 arms, none like another, in two workers; then again from the store. */
async function chip(): Promise<BenchRow[]> {
  const half = (from: number): Promise<void> =>
    new Promise((resolve, reject) => {
      const worker = new Worker(new URL('../cell/junction-worker.ts', import.meta.url), {
        workerData: { from, to: from + 100 },
      });
      worker.once('error', reject);
      worker.once('exit', () => resolve());
    });
  const start = performance.now();
  await Promise.all([half(0), half(100)]);
  const solved = performance.now() - start;
  const store = memoryStore();
  const shapes = Array.from({ length: 200 }, (_, i) => plausibleJunction(i));
  for (const shape of shapes) solveCell(shape, { flow: 0.005, peak: 0.05 }, store);
  return [
    {
      what: '200 distinct junctions at default accuracy, two workers from cold',
      median: solved,
      unit: 'ms',
      runs: 1,
      target: 5000,
    },
    {
      what: 'the same from the store',
      median: timed(() => {
        for (const shape of shapes) solveCell(shape, { flow: 0.005, peak: 0.05 }, store);
      }, 9),
      unit: 'ms',
      runs: 9,
      target: 50,
    },
  ];
}

/** Growth of the process over the largest of three cells. */
function memory(): BenchRow {
  let most = 0;
  for (const shape of [tee(0.5, 0.02), tee(0.05), tee(5, 0.1)]) {
    globalThis.gc?.();
    const before = process.memoryUsage().rss;
    solveCell(shape, { flow: 0.001, peak: 0.01 });
    most = Math.max(most, process.memoryUsage().rss - before);
  }
  return {
    what: 'growth of the process while one T is solved to 0.1 % and its peak to 1 %',
    median: most / 1e6,
    unit: 'MB',
    runs: 3,
    target: 150,
  };
}

/**
 * The same T by tetrahedra in a general finite-element package, on the mesh whose error comes nearest to ours.
 * Both in processor time; the package times its own assembly and solution, without mesh and start.
 */
function freefem(shape: CellShape, exact: Float64Array, ours: { ms: number; error: number }): BenchRow {
  const what = 'T, depth/width 0.5, against FreeFEM (tetrahedra, P2/P1, direct solver)';
  const missing: BenchRow = {
    what,
    median: Number.NaN,
    unit: 'ms',
    runs: 0,
    note: 'not compared: FreeFem++ is not installed (Debian: freefem++ libfreefem++)',
  };
  try {
    execFileSync('which', ['FreeFem++'], { stdio: 'ignore' });
  } catch {
    return missing;
  }
  const folder = mkdtempSync(join(tmpdir(), 'cell-bench-'));
  try {
    let best: { ms: number; error: number } | undefined;
    for (const [n, layers] of [
      [6, 3],
      [8, 4],
      [10, 5],
    ] as const) {
      const script = join(folder, 't.edp');
      writeFileSync(script, freefemScript(n, layers));
      const out = execFileSync('FreeFem++', ['-nw', '-ne', '-v', '0', script], {
        encoding: 'utf8',
        // Debian keeps the package's modules where its program does not look.
        env: { ...process.env, FF_LOADPATH: '/usr/lib/freefem++/' },
      });
      const [q1, q2, seconds] = out
        .match(/RESULT (\S+) (\S+) (\S+)/)!
        .slice(1)
        .map(Number) as [number, number, number];
      // Unit pressure on the left main arm: inflow there, outflow on the right.
      const y = reorder(exact, shape);
      const error = Math.max(Math.abs(q1 / y[0]! - 1), Math.abs(q2 / y[1]! - 1));
      const far = (e: number): number => Math.abs(Math.log(e / ours.error));
      if (!best || far(error) < far(best.error)) best = { ms: seconds * 1000, error };
    }
    return {
      what,
      median: ours.ms,
      unit: 'ms',
      runs: 25,
      against: `FreeFEM's ${best!.ms.toPrecision(3)} ms (error ${percent(best!.error)}, ours ${percent(ours.error)})`,
      ratio: ours.ms / best!.ms,
      target: 1 / 50,
    };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** Exact inflow at a main arm for unit pressure there, and at the other main arm, in widths cubed. */
function reorder(exact: Float64Array, shape: CellShape): [number, number] {
  const { placements } = canonical(shape);
  const [{ face, scale }] = placements;
  const at = (caller: number): number => face.indexOf(caller);
  const y = (i: number, j: number): number => exact[at(i) * 3 + at(j)]! * scale ** 3;
  return [y(0, 0), y(1, 0)];
}

function freefemScript(n: number, layers: number): string {
  return `
load "msh3"
load "UMFPACK64"
int n = ${n};
border b1(t=0,1){x=1.5;y=-0.5+t;label=1;}
border b2(t=0,1){x=1.5-3*t;y=0.5;label=4;}
border b3(t=0,1){x=-1.5;y=0.5-t;label=2;}
border b4(t=0,1){x=-1.5+t;y=-0.5;label=4;}
border b5(t=0,1){x=-0.5;y=-0.5-t;label=4;}
border b6(t=0,1){x=-0.5+t;y=-1.5;label=3;}
border b7(t=0,1){x=0.5;y=-1.5+t;label=4;}
border b8(t=0,1){x=0.5+t;y=-0.5;label=4;}
mesh Th2 = buildmesh(b1(n)+b2(3*n)+b3(n)+b4(n)+b5(n)+b6(n)+b7(n)+b8(n));
int[int] rup=[0,5], rlow=[0,6];
mesh3 Th = buildlayers(Th2, ${layers}, zbound=[0,0.25], labelup=rup, labeldown=rlow);
fespace Vh(Th,[P2,P2,P2,P1]);
real t0 = clock();
varf a([u,v,w,p],[uu,vv,ww,q]) =
  int3d(Th)(dx(u)*dx(uu)+dy(u)*dy(uu)+dz(u)*dz(uu)+dx(v)*dx(vv)+dy(v)*dy(vv)+dz(v)*dz(vv)
  +dx(w)*dx(ww)+dy(w)*dy(ww)+dz(w)*dz(ww)-p*(dx(uu)+dy(vv)+dz(ww))-q*(dx(u)+dy(v)+dz(w))-1e-10*p*q)
  + on(4,5,u=0,v=0,w=0) + on(6,w=0);
varf l1([u,v,w,p],[uu,vv,ww,q]) = int2d(Th,2)(uu) + on(4,5,u=0,v=0,w=0) + on(6,w=0);
varf l2([u,v,w,p],[uu,vv,ww,q]) = int2d(Th,1)(-uu) + on(4,5,u=0,v=0,w=0) + on(6,w=0);
matrix A = a(Vh,Vh);
set(A, solver=UMFPACK);
real[int] f1 = l1(0,Vh), f2 = l2(0,Vh);
real[int] x1 = A^-1*f1, x2 = A^-1*f2;
real t1 = clock();
Vh [u,v,w,p]; u[] = x1;
real q1 = 2*int2d(Th,2)(u), q2 = -2*int2d(Th,1)(u);
cout << "RESULT " << q1 << " " << q2 << " " << t1-t0 << endl;
`;
}
