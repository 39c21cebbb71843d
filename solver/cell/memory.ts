/**
 * Memory that a solve takes, in bytes, estimated before it is begun: factors of one plane matrix per
 * velocity mode (8 + 3 log2 n values per unknown, above what nested elimination of plane meshes fills),
 * two sets of fields per pattern, and the operators themselves.
 */
export function cellBytes(triangles: number, modes: number, patterns: number): number {
  const unknowns = 2 * triangles;
  const fill = 8 + 3 * Math.log2(Math.max(2, unknowns));
  const factors = (2 * modes - 1) * unknowns * fill;
  const fields = 2 * patterns * unknowns * (3 * modes - 1);
  return 8 * (factors + fields) + 1600 * triangles;
}

/** What one cell may take. */
export const CELL_MEMORY = 150e6;

/** Triangles that fit into CELL_MEMORY. */
export function mostTriangles(modes: number, patterns: number): number {
  let low = 100;
  let high = 1e6;
  while (high - low > 1) {
    const middle = Math.floor((low + high) / 2);
    if (cellBytes(middle, modes, patterns) <= CELL_MEMORY) low = middle;
    else high = middle;
  }
  return low;
}
