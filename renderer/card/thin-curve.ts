import { useEffect, useState } from 'react';
import type { FluidSpec } from '../../solver/fluid/spec.ts';
import type { PerimeterCurve } from '../../solver/section/perimeter-curve.ts';
import type { Profile } from '../../solver/section/profile.ts';
import { thinPerimeterCurve } from '../../solver/section/rheology/thin-curve.ts';

/** ms that nothing changed before the section is solved: it costs more than a frame. */
const REST = 120;

/**
 * Wall shear round a section of a shear-thinning fluid, from its own solved flow at the mean wall shear that
 * the answer gives (Pa); null of other fluids, while it is not solved yet, and where it cannot be.
 */
export function useThinCurve(
  fluid: FluidSpec,
  profile: Profile,
  width: number,
  depth: number,
  mean: number | null,
): PerimeterCurve | null {
  const [solved, setSolved] = useState<{ readonly of: string; readonly curve: PerimeterCurve | null } | null>(
    null,
  );
  const model = 'shear' in fluid ? fluid.shear : null;
  // what is drawn shows three digits: no more of the mean is looked at
  const stress = mean !== null && mean > 0 ? Number(mean.toPrecision(3)) : null;
  const of = model && stress !== null ? JSON.stringify([model, profile, width, depth, stress]) : '';
  useEffect(() => {
    if (!model || stress === null) return;
    const timer = setTimeout(() => {
      let curve: PerimeterCurve | null = null;
      try {
        curve = thinPerimeterCurve(model, profile, width, depth, stress);
      } catch {
        // then its mean and its peak are told in words, as they are in the answer
      }
      setSolved({ of, curve });
    }, REST);
    return () => clearTimeout(timer);
  }, [of, model, profile, width, depth, stress]);
  return of !== '' && solved?.of === of ? solved.curve : null;
}
