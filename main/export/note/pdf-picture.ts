import { COLOURS, type Element, type Sheet, type Style } from './pdf-page.ts';
import type { Item, Picture, Tone } from './picture.ts';
import { MM_PER_POINT } from './picture.ts';

/** Drawings in the page: vector, at their own size, so that a millimetre of them is one of paper. */

const CAPTION: Style = { face: 'figure', size: 7.6, leading: 10, colour: 'soft' };
const GAP = 14;
/** As in the paper's own measure. */
const points = (mm: number): number => mm / MM_PER_POINT;

const tone = (name: Tone): string => COLOURS[name];

function drawItem({ doc, fonts }: Sheet, item: Item, x: number, y: number): void {
  const px = (mm: number): number => x + points(mm);
  const py = (mm: number): number => y + points(mm);
  if (item.kind === 'label') {
    const size = points(item.size);
    const face = item.strong ? 'figure strong' : 'figure';
    const wide = fonts.width(item.text, face, size);
    const from = item.anchor === 'start' ? 0 : item.anchor === 'middle' ? -wide / 2 : -wide;
    doc.save().translate(px(item.at[0]), py(item.at[1]));
    if (item.upward) doc.rotate(-90);
    if (item.cleared)
      doc.rect(from - 0.12 * size, -0.8 * size, wide + 0.24 * size, 1.02 * size).fill(COLOURS.paper);
    doc.fillColor(tone(item.tone ?? 'ink'));
    fonts.draw(item.text, face, size, from, 0);
    doc.restore();
    return;
  }
  if (item.kind === 'disc') doc.circle(px(item.at[0]), py(item.at[1]), points(item.radius));
  else {
    for (const loop of item.loops) {
      for (const [i, [lx, ly]] of loop.entries())
        if (i === 0) doc.moveTo(px(lx), py(ly));
        else doc.lineTo(px(lx), py(ly));
      if (item.closed) doc.closePath();
    }
    if (item.dashed) doc.dash(points(0.8), { space: points(0.5) });
  }
  const { fill, stroke } = item;
  doc
    .lineWidth(points(item.weight ?? 0.1))
    .lineJoin('miter')
    .miterLimit(4);
  if (fill && stroke) doc.fillAndStroke(tone(fill), tone(stroke), 'even-odd');
  else if (fill) doc.fill(tone(fill), 'even-odd');
  else if (stroke) doc.stroke(tone(stroke));
  if (item.kind === 'shape' && item.dashed) doc.undash();
}

/** Pictures side by side where they fit, each with its caption. */
export function drawPictures(
  sheet: Sheet,
  parent: Element,
  pictures: readonly Picture[],
  lead: number,
): void {
  let row: Picture[] = [];
  let used = 0;
  const flush = (): void => {
    if (row.length > 0) drawRow(sheet, parent, row, lead);
    row = [];
    used = 0;
  };
  for (const picture of pictures) {
    const wide = points(picture.width);
    if (row.length > 0 && used + GAP + wide > sheet.width) flush();
    row.push(picture);
    used += wide + GAP;
  }
  flush();
}

function drawRow(sheet: Sheet, parent: Element, row: readonly Picture[], lead: number): void {
  const captions = row.map(({ caption, width }) =>
    sheet.lines([caption], CAPTION, row.length === 1 ? sheet.width : points(width)),
  );
  const tall = Math.max(...row.map(({ height }) => points(height)));
  const below = Math.max(...captions.map((lines) => lines.length)) * CAPTION.leading + 4;
  if (!sheet.need(lead + tall + below) && !sheet.top) sheet.y += lead;
  let x = sheet.left;
  for (const [i, picture] of row.entries()) {
    const { alt } = picture;
    const bbox = [x, sheet.y, x + points(picture.width), sheet.y + points(picture.height)];
    const figure = sheet.begin(parent, 'Figure', { alt, bbox });
    sheet.into(figure, 'Figure', () => {
      for (const item of picture.items) drawItem(sheet, item, x, sheet.y);
    });
    figure.end();
    const caption = sheet.begin(parent, 'Caption');
    sheet.into(caption, 'Caption', () => {
      for (const [l, line] of captions[i]!.entries())
        sheet.line(line, CAPTION, x, sheet.y + tall + CAPTION.leading * (l + 0.74) + 2);
    });
    caption.end();
    x += points(picture.width) + GAP;
  }
  sheet.y += tall + below;
}
