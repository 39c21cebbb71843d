/** A DXF drawing of many entities, as text: channels drawn as lines, bent ones as polylines, pads, blocks. */
export function largeDxf(entities: number): string {
  const out = ['0', 'SECTION', '2', 'HEADER', '9', '$INSUNITS', '70', '13', '0', 'ENDSEC'];
  const put = (...pairs: (string | number)[]): void => {
    for (const part of pairs) out.push(String(part));
  };
  put(0, 'SECTION', 2, 'BLOCKS', 0, 'BLOCK', 8, 0, 2, 'CELL', 10, 0, 20, 0);
  put(0, 'LWPOLYLINE', 8, 0, 90, 4, 70, 1, 10, 0, 20, 0, 10, 700, 20, 0, 10, 700, 20, 60, 10, 0, 20, 60);
  put(0, 'ENDBLK', 0, 'ENDSEC', 0, 'SECTION', 2, 'ENTITIES');
  const columns = 120;
  let made = 0;
  for (let k = 0; made < entities; k += 1) {
    const [x, y] = [1000 + (k % columns) * 1000, 1000 + Math.floor(k / columns) * 600];
    // A straight channel as four loose lines.
    const [w, h] = [800, 40 + (k % 7) * 5];
    const corners = [x, y, x + w, y, x + w, y + h, x, y + h];
    for (let i = 0; i < 4; i += 1) {
      const j = (2 * i + 2) % 8;
      put(
        0,
        'LINE',
        8,
        'FLOW',
        10,
        corners[2 * i],
        20,
        corners[2 * i + 1],
        11,
        corners[j],
        21,
        corners[j + 1],
      );
    }
    made += 4;
    if (k % 4 === 0) {
      // A bent one with true arcs: radius 100 inside, 150 outside.
      put(0, 'LWPOLYLINE', 8, 'FLOW', 90, 8, 70, 1);
      put(10, x, 20, y + 200, 10, x + 300, 20, y + 200, 42, Math.tan(Math.PI / 8));
      put(10, x + 450, 20, y + 350, 10, x + 450, 20, y + 500, 10, x + 400, 20, y + 500);
      put(10, x + 400, 20, y + 350, 42, -Math.tan(Math.PI / 8), 10, x + 300, 20, y + 250, 10, x, 20, y + 250);
      put(0, 'CIRCLE', 8, 'HOLES', 10, x + 20, 20, y + 20, 40, 15);
      made += 2;
    }
    if (k % 9 === 0) {
      put(0, 'INSERT', 8, 'FLOW', 2, 'CELL', 10, x + 50, 20, y + 100);
      made += 1;
    }
  }
  put(0, 'ENDSEC', 0, 'EOF');
  return `${out.join('\n')}\n`;
}

/** A DXF drawing of rectangles that overlap to networks of `each`: two rails, and rungs of unlike widths between them. */
export function networksDxf(entities: number, each: number): string {
  const out: (string | number)[] = [0, 'SECTION', 2, 'HEADER', 9, '$INSUNITS', 70, 13, 0, 'ENDSEC'];
  out.push(0, 'SECTION', 2, 'ENTITIES');
  const rectangle = (x0: number, y0: number, x1: number, y1: number): void => {
    out.push(0, 'LWPOLYLINE', 8, 'FLOW', 90, 4, 70, 1);
    out.push(10, x0, 20, y0, 10, x1, 20, y0, 10, x1, 20, y1, 10, x0, 20, y1);
  };
  const columns = 25;
  const rungs = each - 2;
  for (let n = 0; n * each < entities; n += 1) {
    const x = 1000 + (n % columns) * (rungs * 300 + 1000);
    const y = 1000 + Math.floor(n / columns) * 2500;
    rectangle(x, y, x + rungs * 300, y + 100 + n / 10);
    rectangle(x, y + 1500, x + rungs * 300, y + 1600);
    for (let k = 0; k < rungs; k += 1) {
      const left = x + 100 + 300 * k;
      rectangle(left, y + 50, left + 50 + (k % 3) * 5, y + 1550);
    }
  }
  out.push(0, 'ENDSEC', 0, 'EOF');
  return `${out.join('\n')}\n`;
}
