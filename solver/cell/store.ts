import type { Accuracy, ShapeSolution } from './cell.ts';

/** Where solved shapes are kept: in memory, or in the project file. */
export interface CellStore {
  get(key: string): ShapeSolution | undefined;
  put(key: string, solution: ShapeSolution): void;
}

/** Whether what was solved before serves what is asked now. */
export function serves(known: ShapeSolution, asked: Accuracy): boolean {
  const flow = known.flowError <= asked.flow || known.asked.flow <= asked.flow;
  if (asked.peak === null || known.sharp) return flow;
  const peak =
    (known.peakError !== null && known.peakError <= asked.peak) ||
    (known.asked.peak !== null && known.asked.peak <= asked.peak);
  return flow && peak && known.fields !== null;
}

/** Bytes that a solution takes. */
export function solutionBytes(solution: ShapeSolution): number {
  const { fields, portMatrix } = solution;
  if (!fields) return portMatrix.byteLength;
  const { mesh } = fields;
  const parts = [
    portMatrix,
    fields.inPlane,
    fields.across,
    fields.pressure,
    fields.wallAlong,
    fields.wallAcross,
    mesh.x,
    mesh.y,
    mesh.triangles,
    mesh.boundary,
    mesh.boundaryTag,
  ];
  let bytes = 0;
  for (const part of parts) bytes += part.byteLength;
  return bytes;
}

/** Keeps the solutions used last, up to `mostBytes` together. */
export function memoryStore(mostBytes = 256e6): CellStore & { readonly bytes: () => number } {
  // A Map runs in the order of insertion: what is used is taken out and put in anew.
  const kept = new Map<string, ShapeSolution>();
  let bytes = 0;
  const drop = (key: string): void => {
    const old = kept.get(key);
    if (!old) return;
    kept.delete(key);
    bytes -= solutionBytes(old);
  };
  return {
    bytes: () => bytes,
    get(key) {
      const found = kept.get(key);
      if (found) {
        kept.delete(key);
        kept.set(key, found);
      }
      return found;
    },
    put(key, solution) {
      drop(key);
      kept.set(key, solution);
      bytes += solutionBytes(solution);
      for (const oldest of kept.keys()) {
        if (bytes <= mostBytes || kept.size === 1) break;
        drop(oldest);
      }
    },
  };
}
