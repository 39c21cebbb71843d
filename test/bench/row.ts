/** One measured figure. Ratios are against something run beside it in the same process or the same minute. */
export interface BenchRow {
  readonly what: string;
  /** Median over the runs, in `unit`. */
  readonly median: number;
  readonly unit: string;
  readonly runs: number;
  /** What the figure is compared with, and this median divided by that one. */
  readonly against?: string;
  readonly ratio?: number;
  /** The target in `unit`, or for the ratio where `against` is given. */
  readonly target?: number;
  /** Why a comparison could not be made. */
  readonly note?: string;
}

/** Median of `runs` timings in ms of `work`, after `warmup` uncounted ones. */
export function timed(work: () => void, runs = 9, warmup = 2): number {
  for (let i = 0; i < warmup; i += 1) work();
  const times: number[] = [];
  for (let i = 0; i < runs; i += 1) {
    const start = performance.now();
    work();
    times.push(performance.now() - start);
  }
  times.sort((a, b) => a - b);
  return times[Math.floor(times.length / 2)]!;
}
