import { SaxesParser } from 'saxes';
import { Problem } from '../../../solver/problem/problem.ts';
import { LIMITS, type Work } from '../work.ts';

/** An element of an SVG with what it holds; names without their prefix. */
export interface Element {
  readonly name: string;
  readonly attributes: Readonly<Record<string, string>>;
  readonly children: Element[];
  /** Text of a style sheet; '' in others. */
  text: string;
  readonly line: number;
}

/** Most characters handed to the parser at once. */
const CHUNK = 1 << 16;

/** The root element of an SVG. Entities from outside, and those the file defines itself, are refused. */
export function readTree(bytes: Uint8Array, work: Work): Element {
  const text = decodeXml(bytes);
  const parser = new SaxesParser();
  const stack: Element[] = [];
  let root: Element | null = null;
  const refuse = (what: string, remedy: string): never => {
    throw new Problem('format', what, `line ${parser.line}`, remedy);
  };
  parser.on('error', (error) => {
    const what = error.message.replace(/^\d+:\d+: /, '').slice(0, 200);
    throw new Problem(
      'syntax',
      `This is not well-formed XML: ${what.replace(/\.$/, '')}.`,
      `line ${parser.line}, column ${parser.column}`,
      'Save the drawing again from the program that made it.',
    );
  });
  parser.on('doctype', (doctype) => {
    if (/[[]|ENTITY/i.test(doctype)) {
      refuse(
        'The file defines entities of its own, which are not read.',
        'Save it as plain SVG, without a document type.',
      );
    }
  });
  parser.on('opentag', ({ name, attributes }) => {
    work.entity(`line ${parser.line}`);
    if (stack.length >= LIMITS.nesting) {
      throw new Problem(
        'too-many',
        `Elements are nested more than ${LIMITS.nesting} deep.`,
        `line ${parser.line}`,
        'Ungroup the drawing.',
      );
    }
    const element: Element = { name: local(name), attributes, children: [], text: '', line: parser.line };
    const parent = stack.at(-1);
    if (parent) parent.children.push(element);
    else root ??= element;
    stack.push(element);
  });
  parser.on('closetag', () => {
    stack.pop();
  });
  const keep = (piece: string): void => {
    const open = stack.at(-1);
    if (open?.name === 'style' && open.text.length < CHUNK) open.text += piece;
  };
  parser.on('text', keep);
  parser.on('cdata', keep);
  for (let at = 0; at < text.length; at += CHUNK) {
    parser.write(text.slice(at, at + CHUNK));
    work.at((0.6 * at) / text.length);
  }
  parser.close();
  const found = root as Element | null;
  if (found?.name === 'svg') return found;
  throw new Problem(
    'format',
    `This is not an SVG: its outermost element is ${found ? `<${found.name.slice(0, 40)}>` : 'missing'}.`,
    'line 1',
    'Check that it is the right file.',
  );
}

function decodeXml(bytes: Uint8Array): string {
  const [a, b] = bytes;
  const wide = a === 0xff && b === 0xfe ? 'utf-16le' : a === 0xfe && b === 0xff ? 'utf-16be' : null;
  try {
    return new TextDecoder(wide ?? 'utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw new Problem(
      'not-readable',
      'The file is not text in UTF-8 or UTF-16.',
      '',
      'Save the drawing again as UTF-8.',
    );
  }
}

function local(name: string): string {
  return name.slice(name.indexOf(':') + 1);
}
