/** What is wrong with a text that should be JSON, and where. */
export interface Slip {
  readonly offset: number;
  readonly what: string;
  readonly remedy: string;
}

const NUMBER = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y;
const WORD = /[\p{L}\p{N}_$+.-]+/uy;
const BLANK = /[ \t\r\n]*/y;

function matchAt(pattern: RegExp, text: string, at: number): string | null {
  pattern.lastIndex = at;
  return pattern.exec(text)?.[0] ?? null;
}

/** Place of the quote that closes the string opened at `at`, or of what keeps it from being one. */
function endOfString(text: string, at: number): { readonly end: number; readonly ok: boolean } {
  for (let i = at + 1; i < text.length; i += 1) {
    const code = text.charCodeAt(i);
    if (code === 0x22) return { end: i, ok: true };
    if (code < 0x20) return { end: i, ok: false };
    if (code !== 0x5c) continue;
    const escaped = text.slice(i + 1, i + 6);
    if (/^["\\/bfnrt]/.test(escaped)) i += 1;
    else if (/^u[0-9a-fA-F]{4}/.test(escaped)) i += 5;
    else return { end: i, ok: false };
  }
  return { end: text.length, ok: false };
}

function badString(text: string, at: number, offset: number): Slip {
  if (offset >= text.length) {
    return { offset: at, what: 'A string that opens here is never closed.', remedy: 'Close it with ".' };
  }
  if (text[offset] === '\\') {
    return {
      offset,
      what: 'A string holds a backslash that begins no escape.',
      remedy: 'Double the backslash: \\\\.',
    };
  }
  return {
    offset,
    what: 'A string holds a line break or control character.',
    remedy: 'Close the string with " on its line, or write the character as an escape such as \\n.',
  };
}

function badValue(text: string, at: number, before: string): Slip {
  const sign = text[at]!;
  if (before === ',' && (sign === ']' || sign === '}')) {
    return { offset: at, what: `A comma stands before "${sign}".`, remedy: 'Take the last comma away.' };
  }
  if (sign === '/' || sign === '#') {
    return {
      offset: at,
      what: 'JSON takes no comments.',
      remedy: 'Take the comment away; "note" holds remarks.',
    };
  }
  if (sign === "'") {
    return {
      offset: at,
      what: 'JSON takes no single quotes.',
      remedy: 'Write strings between double quotes.',
    };
  }
  const word = matchAt(WORD, text, at)?.slice(0, 40);
  if (word && /^[+-]?(nan|inf(inity)?)$/i.test(word)) {
    return { offset: at, what: `${word} is no number in JSON.`, remedy: 'Write a finite number.' };
  }
  if (word && /^[+-]?\.?\d/.test(word)) {
    return {
      offset: at,
      what: `${word} is no number in JSON.`,
      remedy:
        'Write it with a digit before the point and no leading zero or plus; with a unit, between quotes.',
    };
  }
  if (word) {
    return {
      offset: at,
      what: `${word} is no JSON value.`,
      remedy: 'Write text and quantities with units between double quotes.',
    };
  }
  return { offset: at, what: `A value is expected here, not "${sign}".`, remedy: 'Write the value.' };
}

/** Where a text stops being JSON, found by walking it once; with `once`, also where a key stands twice in a group. */
export function findSlip(text: string, once = false): Slip | null {
  const open: ('{' | '[')[] = [];
  const keys: Set<string>[] = [];
  let state: 'value' | 'first' | 'key' | 'colon' | 'next' = 'value';
  let before = '';
  let at = 0;
  for (;;) {
    at += matchAt(BLANK, text, at)!.length;
    const inside = open.at(-1);
    if (at >= text.length) {
      if (state === 'next' && !inside) return null;
      const close = inside === '{' ? '}' : inside === '[' ? ']' : undefined;
      return {
        offset: text.length,
        what: text.trim() === '' ? 'The text is empty.' : 'The text ends too early.',
        remedy: close
          ? `Complete it; "${inside}" still needs its "${close}".`
          : 'Write a chip description in it.',
      };
    }
    const sign = text[at]!;
    if (state === 'next') {
      if (!inside) {
        return { offset: at, what: 'More text follows after the end.', remedy: 'Take away what follows.' };
      }
      const close = inside === '{' ? '}' : ']';
      if (sign === close) open.pop();
      else if (sign === ',') state = inside === '{' ? 'key' : 'value';
      else if (sign === '/') return badValue(text, at, before);
      else {
        return {
          offset: at,
          what: `A comma or "${close}" is expected here.`,
          remedy: 'Put a comma between two entries, or close the list.',
        };
      }
      before = sign;
      at += 1;
    } else if (state === 'colon') {
      if (sign !== ':') {
        return {
          offset: at,
          what: 'A colon is expected here.',
          remedy: 'Write ":" between a key and its value.',
        };
      }
      state = 'value';
      before = sign;
      at += 1;
    } else if (state === 'key' || (state === 'first' && inside === '{')) {
      if (state === 'first' && sign === '}') {
        open.pop();
        state = 'next';
        at += 1;
      } else if (sign === '"') {
        const { end, ok } = endOfString(text, at);
        if (!ok) return badString(text, at, end);
        if (once && state === 'first') keys[open.length] = new Set();
        const key = once ? (JSON.parse(text.slice(at, end + 1)) as string) : '';
        if (once && keys[open.length]!.has(key)) {
          return {
            offset: at,
            what: `The key "${key.slice(0, 40)}" stands twice in one group.`,
            remedy: 'Take one of the two away.',
          };
        }
        keys[open.length]?.add(key);
        at = end + 1;
        state = 'colon';
      } else if (sign === '}' || sign === '/' || sign === '#' || sign === "'") {
        return badValue(text, at, before);
      } else {
        return {
          offset: at,
          what: 'A key is expected here.',
          remedy: 'Write the key between double quotes.',
        };
      }
    } else if (state === 'first' && sign === ']') {
      open.pop();
      state = 'next';
      at += 1;
    } else if (sign === '{' || sign === '[') {
      open.push(sign);
      state = 'first';
      before = sign;
      at += 1;
    } else if (sign === '"') {
      const { end, ok } = endOfString(text, at);
      if (!ok) return badString(text, at, end);
      at = end + 1;
      state = 'next';
    } else {
      const word = matchAt(WORD, text, at) ?? '';
      const whole =
        word === 'true' || word === 'false' || word === 'null' || matchAt(NUMBER, text, at) === word;
      if (word === '' || !whole) return badValue(text, at, before);
      at += word.length;
      state = 'next';
    }
  }
}
