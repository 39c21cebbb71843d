import type { Drive } from '../../solver/chip/chip.ts';
import { type Kind, parseQuantity } from '../../solver/chip/units.ts';
import { ratioToNumber } from '../../solver/chip/units-exact.ts';
import { lengthened } from '../card/lengthen.ts';
import { findPart } from '../edits/parts.ts';
import type { Desk } from '../state/desk.ts';
import { readRef } from '../state/ref.ts';
import type { Column } from './table.ts';

/** Applies what was typed into a cell; null, or why it was not. */
export function editCell(desk: Desk, ref: string, column: Column, text: string, unit: string): string | null {
  const chip = desk.chip();
  const part = chip && findPart(chip, ref);
  if (!chip || !part || !column.edits) return 'This cannot be changed here.';
  const { id } = part.value;
  if (column.edits === 'name') {
    const to = text.trim();
    if (to === '') return 'A part needs a name.';
    const why = desk.attempt({ label: `rename ${id}`, rename: [{ ref, to }] });
    const { kind } = readRef(ref);
    const { selection } = desk.view.get();
    if (why === null && selection.includes(ref))
      desk.view.patch({ selection: selection.map((old) => (old === ref ? `${kind}:${to}` : old)) });
    return why;
  }
  if (column.edits === 'drive' && part.kind === 'port') {
    const drive = readDrive(text);
    return typeof drive === 'string'
      ? drive
      : desk.attempt({
          label: `set the drive of ${id}`,
          put: [{ kind: 'port', value: { ...part.value, drive } }],
        });
  }
  const { kind } = column;
  if (!kind) return 'This cannot be changed here.';
  const parsed = parseQuantity(text, kind, unit);
  if (!parsed.ok) return `${column.head} ${parsed.what} ${parsed.remedy}`;
  const value = ratioToNumber(parsed.exact);
  const nm = Math.round(value * 1e9);
  if (column.edits === 'width' && part.kind === 'channel')
    return desk.attempt({
      label: `set the width of ${id}`,
      put: [{ kind: 'channel', value: { ...part.value, width: [nm, nm] } }],
    });
  if (column.edits === 'length' && part.kind === 'channel') {
    const made = lengthened(chip, part.value, nm);
    return typeof made === 'string' ? made : desk.attempt(made);
  }
  if (column.edits === 'hole' && part.kind === 'port')
    return desk.attempt({
      label: `set the hole of ${id}`,
      put: [{ kind: 'port', value: { ...part.value, diameter: nm } }],
    });
  if (column.edits === 'wanted' && part.kind === 'port') {
    const old = chip.targets.find((target) => 'port' in target && target.port === id);
    const within = old?.within ?? 0.02;
    const next = kind === 'flow' ? { port: id, flow: value, within } : { port: id, share: value, within };
    return desk.attempt({
      label: `${old ? 'change' : 'set'} the target of ${id}`,
      set: {
        targets: old
          ? chip.targets.map((target) => (target === old ? next : target))
          : [...chip.targets, next],
      },
    });
  }
  return 'This cannot be changed here.';
}

/** "10 uL/min", "2 kPa", "120 mm high", "open", "closed": what is imposed at a port, or why it is none. */
export function readDrive(text: string): Drive | string {
  const words = text
    .trim()
    .toLowerCase()
    .replace(/\s+high$/, '');
  if (words === 'open') return { kind: 'pressure', pressure: 0 };
  if (words === 'closed') return { kind: 'closed' };
  const given = (kind: Kind): number | null => {
    // without a unit nothing says which of the three it is
    const parsed = /\p{L}/u.test(words)
      ? parseQuantity(text.trim().replace(/\s+high$/i, ''), kind, '')
      : null;
    return parsed?.ok ? ratioToNumber(parsed.exact) : null;
  };
  const flow = given('flow');
  if (flow !== null) return { kind: 'flow', flow };
  const pressure = given('pressure');
  if (pressure !== null) return { kind: 'pressure', pressure };
  const head = given('length');
  if (head !== null) return { kind: 'head', head };
  return 'A drive is a flow, a pressure or a height with its unit, such as "10 uL/min", "2 kPa", "120 mm"; or open, or closed.';
}
