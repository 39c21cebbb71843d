import { type Block, type Column, type Run, type Section, type Table, unitOf } from './blocks.ts';
import type { Note } from './content.ts';
import { fontBytes, WEB_FONTS } from './font-files.ts';
import { COLOURS } from './pdf-page.ts';
import type { Item, Picture } from './picture.ts';

/** The note as one page of HTML that needs nothing else: drawings and fonts inside, no scripts, to be read or printed. */

const SIGNS: Readonly<Record<string, string>> = {
  '&': '&amp;',
  '<': '&lt;',
  '>': '&gt;',
  '"': '&quot;',
  "'": '&#39;',
};
/** What no document of text may hold: controls, halves of surrogate pairs. */
const FORBIDDEN = /(?![\t\n\r])\p{Cc}|\p{Cs}|[\ufffe\uffff]/gu;

export const escaped = (text: string): string =>
  text.replaceAll(FORBIDDEN, '\ufffd').replaceAll(/[&<>"']/g, (sign) => SIGNS[sign]!);

const runs = (all: readonly Run[]): string =>
  all
    .map((run) => (typeof run === 'string' ? escaped(run) : `<strong>${escaped(run.strong)}</strong>`))
    .join('');

/** Names may read either way: each cell finds its own direction. */
const cellText = (text: string): string => (text === '' ? '' : `<bdi>${escaped(text)}</bdi>`);

const fontRules = (): string =>
  WEB_FONTS.map(({ family, weight, font }) => {
    const data = Buffer.from(fontBytes(font)).toString('base64');
    return `@font-face{font-family:"${family}";font-weight:${weight};src:url(data:font/woff2;base64,${data}) format("woff2")}`;
  }).join('\n');

const STYLE = `
:root{color-scheme:light}
*{box-sizing:border-box}
body{margin:0;background:#fff;color:${COLOURS.ink};font:400 14px/21px "Literata",Georgia,serif}
main{max-width:760px;margin:0 auto;padding:40px 24px 64px}
h1{font:600 30px/38px "Literata",Georgia,serif;margin:0;overflow-wrap:anywhere}
h2{font:600 19px/26px "Literata",Georgia,serif;margin:32px 0 6px;break-after:avoid}
p{margin:8px 0;max-width:640px;overflow-wrap:anywhere}
.kind,.soft,figcaption,caption small,tfoot td,dt,thead th,footer{color:${COLOURS.soft}}
.kind,dl,table,figcaption,footer,.sign{font:400 12px/18px "Commissioner","Segoe UI",sans-serif}
.kind{margin:0}
.remark{font-size:15px;line-height:22px}
dl{display:grid;grid-template-columns:160px 1fr;gap:0 12px;margin:8px 0}
dd{margin:0;overflow-wrap:anywhere}
ul{margin:8px 0;padding:0 0 0 18px;max-width:640px}
li{margin:3px 0;overflow-wrap:anywhere}
li::marker{content:"–  "}
.wide{overflow-x:auto}
table{border-collapse:collapse;width:100%;margin:14px 0 0}
caption{text-align:left;font-weight:600;padding-bottom:2px}
th,td{font-weight:400;text-align:left;vertical-align:top;padding:3px 14px 3px 0}
.long{overflow-wrap:anywhere;min-width:12em}
th:last-child,td:last-child{padding-right:0}
thead th{vertical-align:bottom;border-bottom:1px solid ${COLOURS.ink}}
tbody th,tbody td{border-bottom:1px solid ${COLOURS.line}}
tbody tr{break-inside:avoid}
tfoot td{border:0;padding-top:5px}
.f{text-align:right;white-space:nowrap}
td.f{font-family:"Literata",Georgia,serif;font-variant-numeric:tabular-nums lining-nums}
.w td,.w th{height:34px}
tr.missed th:first-child{box-shadow:-6px 0 0 -3px ${COLOURS.ink}}
.no{color:${COLOURS.alarm};font-weight:600}
figure{margin:16px 0 0;break-inside:avoid}
.row{display:flex;flex-wrap:wrap;gap:0 20px}
figure svg{max-width:100%;height:auto;display:block}
.sign{display:grid;grid-template-columns:90px 1fr 1fr 1.6fr;gap:0 16px;margin-top:30px;align-items:end}
.sign span{border-top:1px solid ${COLOURS.soft};color:${COLOURS.soft};font-size:10px}
footer{margin-top:40px;border-top:1px solid ${COLOURS.line};padding-top:8px;overflow-wrap:anywhere}
@media print{main{max-width:none;padding:0}body{font-size:12px;line-height:17px}@page{margin:18mm}}
`;

const number = (value: number): string => String(Number(value.toFixed(3)));

function itemSvg(item: Item): string {
  if (item.kind === 'label') {
    const { at, size, anchor, text, tone = 'ink', strong, cleared, upward } = item;
    const turned = upward ? ` transform="rotate(-90 ${number(at[0])} ${number(at[1])})"` : '';
    const halo = cleared
      ? ` stroke="${COLOURS.paper}" stroke-width="${number(size * 0.4)}" stroke-linejoin="round" paint-order="stroke"`
      : '';
    return `<text x="${number(at[0])}" y="${number(at[1])}" font-size="${number(size)}" text-anchor="${anchor}"${strong ? ' font-weight="600"' : ''} fill="${COLOURS[tone]}"${halo}${turned}>${escaped(text)}</text>`;
  }
  const { fill, stroke, weight = 0.1 } = item;
  const paint = `fill="${fill ? COLOURS[fill] : 'none'}"${stroke ? ` stroke="${COLOURS[stroke]}" stroke-width="${number(weight)}"` : ''}`;
  if (item.kind === 'disc')
    return `<circle cx="${number(item.at[0])}" cy="${number(item.at[1])}" r="${number(item.radius)}" ${paint}/>`;
  const path = item.loops
    .map((loop) => `M${loop.map(([x, y]) => `${number(x)} ${number(y)}`).join('L')}${item.closed ? 'Z' : ''}`)
    .join('');
  return `<path d="${path}" fill-rule="evenodd" ${paint}${item.dashed ? ' stroke-dasharray="0.8 0.5"' : ''}/>`;
}

/** A drawing at its own size: a millimetre of it is one of the paper that the page is printed on. */
export function pictureSvg({ width, height, items, alt }: Picture): string {
  const [w, h] = [number(width), number(height)];
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${w}mm" height="${h}mm" viewBox="0 0 ${w} ${h}" role="img" aria-label="${escaped(alt)}" font-family="Commissioner,'Segoe UI',sans-serif">${items.map(itemSvg).join('')}</svg>`;
}

const isWritten = ({ texts, cells }: Column): boolean =>
  texts.every((text) => text === '') && cells.every((cell) => cell === null);

function tableHtml({ title, columns, rows, missed, foot, more }: Table, titled: boolean): string {
  if (rows === 0) return '';
  const heads = columns.map((column) => {
    const unit = unitOf(column);
    return `<th scope="col"${column.kind === 'figures' ? ' class="f"' : ''}>${escaped(column.head)}${unit ? `<br>${escaped(unit)}` : ''}</th>`;
  });
  const body = Array.from({ length: rows }, (_, i) => {
    const cells = columns.map((column, c) => {
      const text = cellText(column.texts[i]!);
      const no = column.kind === 'verdict' && column.cells[i] === false;
      const long = /\S{24}/.test(column.texts[i]!);
      const kind =
        column.kind === 'figures' ? ' class="f"' : no ? ' class="no"' : long ? ' class="long"' : '';
      return c === 0 ? `<th scope="row"${kind}>${text}</th>` : `<td${kind}>${text}</td>`;
    });
    return `<tr${missed?.has(i) ? ' class="missed"' : ''}>${cells.join('')}</tr>`;
  });
  const said = [
    more ? `And ${more.toLocaleString('en')} more rows in the comma-separated values.` : '',
    foot ?? '',
  ].filter((text) => text !== '');
  return [
    `<div class="wide"><table${columns.some(isWritten) ? ' class="w"' : ''}>`,
    `<caption${titled ? '' : ' hidden'}>${escaped(title)}</caption>`,
    `<thead><tr>${heads.join('')}</tr></thead>`,
    `<tbody>${body.join('\n')}</tbody>`,
    said.length > 0
      ? `<tfoot><tr><td colspan="${columns.length}">${escaped(said.join(' '))}</td></tr></tfoot>`
      : '',
    '</table></div>',
  ].join('\n');
}

function blockHtml(block: Block, heading: string): string {
  switch (block.kind) {
    case 'table':
      return tableHtml(block.table, block.table.title !== heading);
    case 'pictures':
      return `<div class="row">${block.pictures
        .map(
          (picture) =>
            `<figure>${pictureSvg(picture)}<figcaption>${escaped(picture.caption)}</figcaption></figure>`,
        )
        .join('')}</div>`;
    case 'facts':
      return `<dl>${block.rows.map(({ name, value }) => `<dt>${escaped(name)}</dt><dd>${runs(value)}</dd>`).join('')}</dl>`;
    case 'list':
      return `<ul>${block.items.map((item) => `<li>${runs(item)}</li>`).join('')}</ul>`;
    case 'lines':
      return block.rows
        .map(
          (row) =>
            `<div class="sign"><b>${escaped(row)}</b>${block.heads.map((head) => `<span>${escaped(head)}</span>`).join('')}</div>`,
        )
        .join('');
    default:
      return `<p${block.soft ? ' class="soft"' : ''}>${runs(block.runs)}</p>`;
  }
}

const sectionHtml = ({ id, title, blocks }: Section): string =>
  `<section id="${escaped(id)}">\n<h2>${escaped(title)}</h2>\n${blocks.map((block) => blockHtml(block, title)).join('\n')}\n</section>`;

export function noteHtml({ title, subtitle, remark, origin, sections }: Note): string {
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'; font-src data:">
<meta name="viewport" content="width=device-width">
<meta name="generator" content="${escaped(origin.program)}">
<title>${escaped(title)}: ${escaped(subtitle.toLowerCase())}</title>
<style>${fontRules()}${STYLE}</style>
</head>
<body>
<main>
<p class="kind">${escaped(subtitle)}</p>
<h1><bdi>${escaped(title)}</bdi></h1>
${remark ? `<p class="remark">${escaped(remark)}</p>` : ''}
${sections.map(sectionHtml).join('\n')}
<footer>${escaped(origin.program)} · ${escaped(origin.date)} · chip ${escaped(origin.hash)}</footer>
</main>
</body>
</html>
`;
}
