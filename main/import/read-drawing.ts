import { Problem } from '../../solver/problem/problem.ts';
import type { Drawing } from './drawing.ts';
import { readDxf } from './dxf/read-dxf.ts';
import { readGds } from './gds/read-gds.ts';
import { readSvg } from './svg/read-svg.ts';
import { LIMITS, type Work } from './work.ts';

/** A DXF, SVG or GDSII file, told apart by how it begins, as a drawing. Throws `Problem`. */
export function readDrawing(bytes: Uint8Array, work: Work): Drawing {
  if (bytes.length > LIMITS.bytes) {
    throw new Problem('too-many', 'The drawing is larger than 64 MB.', '', 'Leave out what is not needed.');
  }
  if (bytes.length === 0) {
    throw new Problem('format', 'The file is empty.', '', 'Choose a DXF, SVG or GDSII file.');
  }
  work.stage('reading');
  // A stream begins with a HEADER record of six bytes, which no text does.
  if (bytes[0] === 0 && bytes[2] === 0 && bytes[3] === 2) return readGds(bytes, work);
  const wide = (bytes[0] === 0xff && bytes[1] === 0xfe) || (bytes[0] === 0xfe && bytes[1] === 0xff);
  const head = new TextDecoder('latin1').decode(bytes.subarray(0, 512)).replace(/^\u00ef\u00bb\u00bf/, '');
  if (wide || head.trimStart().startsWith('<')) return readSvg(bytes, work);
  if (/^(AutoCAD Binary DXF|\s*(0|999)\s*\r?\n)/.test(head)) return readDxf(bytes, work);
  throw new Problem(
    'format',
    'This is neither a DXF, nor an SVG, nor a GDSII file.',
    '',
    'Save the drawing in one of these formats.',
  );
}
