import type { Acceptance, Process } from './making.ts';
import { at, Fault } from './schema-fault.ts';
import { notNegative, positive } from './schema-range.ts';

/** What must hold of the process and of what is accepted. */

export const LENGTHS = ['leastWidth', 'leastGap', 'toolRadius', 'edge', 'alignment'] as const;
export const NUMBERS = ['deepest', 'widest', 'wall', 'undercut'] as const;
export function checkProcess(process: Process): void {
  for (const key of LENGTHS) if (process[key] !== undefined) notNegative(process[key], key, 'length');
  for (const key of NUMBERS) {
    const value = process[key];
    if (value === undefined) continue;
    if (key === 'undercut') notNegative(value, key, 'number');
    else positive(value, key, 'number');
  }
  if (process.modulus !== undefined) positive(process.modulus, 'modulus', 'modulus');
}

export function checkAccepted(entries: readonly Acceptance[]): void {
  const known = new Set<string>();
  entries.forEach(({ kind, where, reason }, i) => {
    at([i], () => {
      if (reason.trim() === '') {
        throw new Fault('missing', 'is empty.', 'Say why the finding is accepted.', ['reason']);
      }
      const key = `${kind} ${where}`;
      if (known.has(key)) {
        throw new Fault('duplicate', 'accepts the same finding twice.', 'Take one of the two away.');
      }
      known.add(key);
    });
  });
}
