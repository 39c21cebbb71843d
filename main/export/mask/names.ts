/** Names as the formats take them; the full ones stand in the notes of each file. */

/** Letters without their accents, then only those of `allowed`; never empty. */
function safe(text: string, allowed: RegExp, most: number): string {
  const plain = text.normalize('NFKD').replace(/\p{M}/gu, '');
  const kept = [...plain].map((c) => (allowed.test(c) ? c : '_')).join('');
  const short = kept
    .replace(/_{2,}/g, '_')
    .replace(/^_+|_+$/g, '')
    .slice(0, most);
  return short === '' ? 'unnamed' : short;
}

/** A name that every file system takes. */
export const fileName = (text: string): string => safe(text, /[A-Za-z0-9-]/, 60);

/** Name of a layer in letters that every format takes; its number keeps it apart from all others. */
export const keyOf = (number: number, id: string): string =>
  `L${number}_${safe(id, /[A-Za-z0-9]/, 16).toUpperCase()}`;

/**
 * ASCII with every other UTF-16 unit as \U+XXXX, the escape that the DXF reference gives for text beyond the
 * code page. A backslash before "U+" is spelt the same way, so that reading it back is exact; line ends
 * and control characters become spaces.
 */
export function escaped(text: string): string {
  let out = '';
  for (let i = 0; i < text.length; i++) {
    const code = text.charCodeAt(i);
    if (code < 0x20 || code === 0x7f) out += ' ';
    else if (code > 0x7e || (code === 0x5c && text.startsWith('U+', i + 1)))
      out += `\\U+${code.toString(16).toUpperCase().padStart(4, '0')}`;
    else out += text[i];
  }
  return out;
}

export function unescaped(text: string): string {
  return text.replace(/\\U\+([0-9A-F]{4})/g, (_, hex: string) =>
    String.fromCharCode(Number.parseInt(hex, 16)),
  );
}

/** A text in lines of at most `most` characters, broken at spaces where there are any; nothing is lost. */
export function wrapped(text: string, most: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    let rest = [...word];
    const joined = line === '' ? rest.length : [...line].length + 1 + rest.length;
    if (joined <= most) {
      line = line === '' ? word : `${line} ${word}`;
      continue;
    }
    if (line !== '') lines.push(line);
    while (rest.length > most) {
      lines.push(rest.slice(0, most).join(''));
      rest = rest.slice(most);
    }
    line = rest.join('');
  }
  if (line !== '' || lines.length === 0) lines.push(line);
  return lines;
}
