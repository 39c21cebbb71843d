import type { Accuracy } from './cell.ts';
import { solveCell } from './solve-cell.ts';

/**
 * Solves a few small junctions so that the runtime has compiled the routines before the first real one:
 * the first solve after start takes some 200 ms, the tenth 10. To be called while idle.
 */
export function warmUp(rounds = 6, accuracy?: Accuracy): void {
  for (let i = 0; i < rounds; i += 1) {
    const half = 0.5 + 0.01 * i;
    const corner = (x: number, y: number, bulge: number, tag: number) => ({ x, y, bulge, tag });
    const r = 0.1;
    const arc = -Math.tan(Math.PI / 8);
    const shape = {
      loops: [
        [
          corner(1.6, -half, 0, 1),
          corner(1.6, half, 0, 0),
          corner(-1.6, half, 0, 2),
          corner(-1.6, -half, 0, 0),
          corner(-half - r, -half, arc, 0),
          corner(-half, -half - r, 0, 0),
          corner(-half, -1.7, 0, 3),
          corner(half, -1.7, 0, 0),
          corner(half, -half - r, arc, 0),
          corner(half + r, -half, 0, 0),
        ],
      ],
      depth: 0.6,
      faces: 3,
      profile: { kind: 'rectangle' },
    } as const;
    solveCell(shape, accuracy);
  }
}
