import { lazy, Suspense } from 'react';

const Plots = lazy(() => import('../plots/plots.tsx'));

/** The plots and what draws them are fetched when they are first asked for. */
export function PlotsPanel() {
  return (
    <Suspense fallback={<p className="soft">Drawing …</p>}>
      <Plots />
    </Suspense>
  );
}
