import type { Tolerance } from './chip.ts';
import { at, Fault } from './schema-fault.ts';
import { between } from './schema-range.ts';
import type { Tolerances } from './tolerance.ts';

function checkOne(tolerance: Tolerance, key: string): void {
  if ('share' in tolerance ? tolerance.share >= 0 && tolerance.share < 1 : tolerance.length >= 0) return;
  throw new Fault('range', 'must lie from 0 to below 100 %, or be a length.', 'Correct the tolerance.', [
    key,
  ]);
}

export function checkTolerances(tolerances: Tolerances | undefined): void {
  if (!tolerances) return;
  at(['tolerance'], () => {
    const { depth, width, common } = tolerances;
    if (depth) checkOne(depth, 'depth');
    if (width) checkOne(width, 'width');
    if (common !== undefined) between(common, 'common', 0, 1);
  });
}
