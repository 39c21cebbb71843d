/** Letters to insert, drop, replace or swap with a neighbour to get from `a` to `b`. */
function distance(a: string, b: string): number {
  let before: number[] = [];
  let above = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i += 1) {
    const row = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const cost = a[i - 1] === b[j - 1] ? 0 : 1;
      let best = Math.min(above[j]! + 1, row[j - 1]! + 1, above[j - 1]! + cost);
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) {
        best = Math.min(best, before[j - 2]! + 1);
      }
      row.push(best);
    }
    before = above;
    above = row;
  }
  return above[b.length]!;
}

/** So many words are gone through: a chip of a hundred thousand ids needs no better guess. */
const LOOKED_AT = 20_000;

/** The known word that `word` was most likely meant to be: the fewest slips away, capitals counting least. */
export function nearest(word: string, known: Iterable<string>): string | undefined {
  const asked = word.slice(0, 80);
  const folded = asked.toLowerCase();
  let best: string | undefined;
  let least = Number.POSITIVE_INFINITY;
  let count = 0;
  for (const candidate of known) {
    count += 1;
    if (count > LOOKED_AT) break;
    if (Math.abs(candidate.length - word.length) >= least) continue;
    const slips =
      distance(folded, candidate.toLowerCase().slice(0, 80)) +
      (candidate.toLowerCase() === folded || candidate[0] === asked[0] ? 0 : 0.5);
    if (slips < least) {
      least = slips;
      best = candidate;
    }
  }
  return best;
}
