/** What was found of two things that never change, kept while both are. */
export function byPair<A extends object, T, B extends object = A>(): (
  p: A,
  q: B,
  find: (p: A, q: B) => T,
) => T {
  const kept = new WeakMap<A, WeakMap<B, { readonly found: T }>>();
  return (p, q, find) => {
    let others = kept.get(p);
    if (!others) {
      others = new WeakMap();
      kept.set(p, others);
    }
    let known = others.get(q);
    if (!known) {
      known = { found: find(p, q) };
      others.set(q, known);
    }
    return known.found;
  };
}
