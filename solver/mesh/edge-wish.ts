/** A wished edge length at the share `t` of the boundary edge `edge`. */
export interface EdgeWish {
  readonly edge: number;
  readonly t: number;
  readonly size: number;
}

/** Wishes in order along their edge, none larger than what another lets grow there; `growth` per share. */
export function relaxed(wishes: readonly EdgeWish[], growth: number): EdgeWish[] {
  const sorted = [...wishes].sort(byShare);
  for (let i = 1; i < sorted.length; i += 1) sorted[i] = lowered(sorted[i], sorted[i - 1], growth);
  for (let i = sorted.length - 2; i >= 0; i -= 1) sorted[i] = lowered(sorted[i], sorted[i + 1], growth);
  return sorted;
}

const byShare = (a: EdgeWish, b: EdgeWish): number => a.t - b.t;

function lowered(wish: EdgeWish, by: EdgeWish, growth: number): EdgeWish {
  const size = by.size + growth * Math.abs(wish.t - by.t);
  return size < wish.size ? { ...wish, size } : wish;
}

/** What relaxed wishes allow at the share t: the neighbours on both sides decide. */
export function wishAt(wishes: readonly EdgeWish[], t: number, growth: number): number {
  let [low, high] = [0, wishes.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (wishes[middle].t < t) low = middle + 1;
    else high = middle;
  }
  let size = Number.POSITIVE_INFINITY;
  if (low > 0) size = wishes[low - 1].size + growth * (t - wishes[low - 1].t);
  if (low < wishes.length) size = Math.min(size, wishes[low].size + growth * (wishes[low].t - t));
  return size;
}
