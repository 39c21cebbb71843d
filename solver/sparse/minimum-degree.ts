/**
 * Approximate minimum degree: an order of elimination that keeps the factor of a symmetric matrix sparse.
 * Amestoy, Davis and Duff 1996 (SIAM J. Matrix Anal. Appl. 17, 886), on the quotient graph.
 *
 * The graph holds variables (not yet eliminated) and elements (cliques left by eliminated ones). A
 * variable's list in `graph` is first its elements, then its variables; an element's list is variables.
 * Eliminating p makes the element p = all variables reachable from p; elements of p vanish in it. Instead
 * of the exact degree, which needs set unions, the bound
 *   degree(i) = |A_i| + |element p \ i| + Σ over other elements e of i of |e \ p|
 * is kept, where all |e \ p| come out of one sweep over the elements near p. Variables that have become
 * indistinguishable are found by a hash and eliminated together.
 *
 * Nearly full rows (an arrow's shaft, a hub) are put last, untouched, for they would be scanned each time.
 *
 * @param n number of variables
 * @param start n + 1, into `graph`
 * @param graph the neighbours of each variable, both ways, no diagonal; room for n more at the end; destroyed
 * @param order receives the variables in order of elimination, n
 */
export function minimumDegree(n: number, start: Int32Array, graph: Int32Array, order: Int32Array): void {
  const head = start.slice(0, n);
  const length = new Int32Array(n);
  /** Number of elements in front of a variable's list. */
  const elements = new Int32Array(n);
  /** Variables merged into this one, itself counted; 0 for one merged away or eliminated; negative while in the new element. */
  const size = new Int32Array(n).fill(1);
  const degree = new Int32Array(n);
  /** mark[e] − stamp = |e \ p| for elements near p, in the round of that stamp; 0 for a dead element. */
  const mark = new Int32Array(n).fill(1);
  // Doubly linked lists of variables by degree; the same links hold hash buckets during a round.
  const byDegree = new Int32Array(n + 1).fill(-1);
  const next = new Int32Array(n).fill(-1);
  const previous = new Int32Array(n).fill(-1);
  const byHash = new Int32Array(n).fill(-1);
  const hash = new Int32Array(n);
  // Variables that are eliminated with a given one, as a chain.
  const chain = new Int32Array(n).fill(-1);
  const chainEnd = new Int32Array(n);

  let free = n > 0 ? start[n] : 0;
  let stamp = 2;
  /** Largest weight of an element so far: by so much the marks of one round can exceed its stamp. */
  let heaviest = 0;
  let least = n;
  let done = 0;
  let ordered = 0;

  const emit = (variable: number) => {
    for (let v = variable; v !== -1; v = chain[v]) {
      order[ordered] = v;
      ordered += 1;
    }
  };
  const merge = (into: number, gone: number) => {
    size[gone] = 0;
    chain[chainEnd[into]] = gone;
    chainEnd[into] = chainEnd[gone];
  };
  const enlist = (i: number, d: number) => {
    const first = byDegree[d];
    next[i] = first;
    previous[i] = -1;
    if (first !== -1) previous[first] = i;
    byDegree[d] = i;
    degree[i] = d;
    if (d < least) least = d;
  };
  const delist = (i: number) => {
    const before = previous[i];
    const after = next[i];
    if (after !== -1) previous[after] = before;
    if (before !== -1) next[before] = after;
    else byDegree[degree[i]] = after;
  };
  /** Moves the live lists to the front of the graph. */
  const compact = () => {
    for (let i = 0; i < n; i += 1) {
      if (length[i] === 0) continue;
      const at = head[i];
      head[i] = graph[at];
      graph[at] = -i - 1;
    }
    let to = 0;
    for (let from = 0; from < free; ) {
      const owner = -graph[from] - 1;
      if (owner < 0) {
        from += 1;
        continue;
      }
      graph[to] = head[owner];
      head[owner] = to;
      const count = length[owner];
      for (let k = 1; k < count; k += 1) graph[to + k] = graph[from + k];
      to += count;
      from += count;
    }
    free = to;
  };

  const dense = Math.max(16, Math.floor(10 * Math.sqrt(n)));
  let denseFirst = -1;
  for (let i = n - 1; i >= 0; i -= 1) {
    chainEnd[i] = i;
    const d = start[i + 1] - start[i];
    length[i] = d;
    if (d > dense) {
      size[i] = 0;
      length[i] = 0;
      next[i] = denseFirst;
      denseFirst = i;
      done += 1;
    } else {
      enlist(i, d);
    }
  }

  while (done < n) {
    while (byDegree[least] === -1) least += 1;
    const p = byDegree[least];
    delist(p);
    const own = size[p];
    done += own;

    // The new element: the variables of p and of its elements.
    const elementCount = elements[p];
    if (elementCount > 0 && free + degree[p] > graph.length) compact();
    const pHead = head[p];
    const pEnd = pHead + length[p];
    // Without elements the new list fits where p's was.
    const listStart = elementCount === 0 ? pHead : free;
    let listEnd = listStart;
    size[p] = -own;
    let weight = 0;
    for (let k = pHead; k < pHead + elementCount; k += 1) {
      const e = graph[k];
      const eHead = head[e];
      const eEnd = eHead + length[e];
      for (let q = eHead; q < eEnd; q += 1) {
        const i = graph[q];
        const s = size[i];
        if (s <= 0) continue;
        weight += s;
        size[i] = -s;
        graph[listEnd] = i;
        listEnd += 1;
        delist(i);
      }
      mark[e] = 0;
      length[e] = 0;
    }
    for (let k = pHead + elementCount; k < pEnd; k += 1) {
      const i = graph[k];
      const s = size[i];
      if (s <= 0) continue;
      weight += s;
      size[i] = -s;
      graph[listEnd] = i;
      listEnd += 1;
      delist(i);
    }
    if (elementCount !== 0) free = listEnd;
    head[p] = listStart;

    // |e \ p| for every element e that shares a variable with p.
    if (stamp > 0x3fffffff - n) {
      for (let e = 0; e < n; e += 1) if (mark[e] !== 0) mark[e] = 1;
      stamp = 2;
    }
    for (let k = listStart; k < listEnd; k += 1) {
      const i = graph[k];
      const s = -size[i];
      const iHead = head[i];
      const iEnd = iHead + elements[i];
      for (let q = iHead; q < iEnd; q += 1) {
        const e = graph[q];
        const m = mark[e];
        if (m >= stamp) mark[e] = m - s;
        else if (m !== 0) mark[e] = degree[e] + stamp - s;
      }
    }

    // New degree bounds; lists lose what p covers; variables that see nothing but p go with it.
    for (let k = listStart; k < listEnd; k += 1) {
      const i = graph[k];
      const iHead = head[i];
      const iElementEnd = iHead + elements[i];
      const iEnd = iHead + length[i];
      let to = iHead;
      let sum = 0;
      let key = 0;
      for (let q = iHead; q < iElementEnd; q += 1) {
        const e = graph[q];
        const m = mark[e];
        if (m === 0) continue;
        const outside = m - stamp;
        if (outside > 0) {
          sum += outside;
          key += e;
          graph[to] = e;
          to += 1;
        } else {
          // All of e lies in p.
          mark[e] = 0;
          length[e] = 0;
        }
      }
      const kept = to - iHead + 1;
      const third = to;
      for (let q = iElementEnd; q < iEnd; q += 1) {
        const j = graph[q];
        const s = size[j];
        if (s <= 0) continue;
        sum += s;
        key += j;
        graph[to] = j;
        to += 1;
      }
      if (sum === 0) {
        const s = -size[i];
        merge(p, i);
        length[i] = 0;
        weight -= s;
        done += s;
        continue;
      }
      if (sum < degree[i]) degree[i] = sum;
      // p goes in front; what stood there moves to the end of its part. There is room: i has lost p or an element.
      graph[to] = graph[third];
      graph[third] = graph[iHead];
      graph[iHead] = p;
      elements[i] = kept;
      length[i] = to - iHead + 1;
      key = (key & 0x7fffffff) % n;
      hash[i] = key;
      next[i] = byHash[key];
      byHash[key] = i;
    }
    degree[p] = weight;
    if (weight > heaviest) heaviest = weight;
    stamp += heaviest + 1;

    // Indistinguishable variables: same hash, then same lists.
    for (let k = listStart; k < listEnd; k += 1) {
      const any = graph[k];
      if (size[any] === 0) continue;
      const key = hash[any];
      let i = byHash[key];
      byHash[key] = -1;
      for (; i !== -1 && next[i] !== -1; i = next[i], stamp += 1) {
        const iHead = head[i];
        const count = length[i];
        const elementsOfI = elements[i];
        for (let q = iHead + 1; q < iHead + count; q += 1) mark[graph[q]] = stamp;
        let last = i;
        for (let j = next[i]; j !== -1; ) {
          let same = length[j] === count && elements[j] === elementsOfI;
          const jHead = head[j];
          for (let q = jHead + 1; same && q < jHead + count; q += 1) same = mark[graph[q]] === stamp;
          const after = next[j];
          if (same) {
            size[i] += size[j];
            merge(i, j);
            length[j] = 0;
            next[last] = after;
          } else {
            last = j;
          }
          j = after;
        }
      }
    }

    // Back to the degree lists; the new element keeps only variables that live.
    let to = listStart;
    const remaining = n - done;
    for (let k = listStart; k < listEnd; k += 1) {
      const i = graph[k];
      const s = -size[i];
      if (s <= 0) continue;
      size[i] = s;
      const bound = degree[i] + weight - s;
      const d = Math.min(bound, remaining - s);
      enlist(i, d);
      graph[to] = i;
      to += 1;
    }
    length[p] = to - listStart;
    if (to === listStart) mark[p] = 0;
    if (elementCount !== 0) free = to;
    size[p] = 0;
    emit(p);
  }
  for (let i = denseFirst; i !== -1; i = next[i]) {
    order[ordered] = i;
    ordered += 1;
  }
}
