/** JSON with its keys in alphabetical order, so that two values that are alike give the same text. */
export function canonical(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(canonical).join(',')}]`;
  if (typeof value !== 'object' || value === null) return JSON.stringify(value) ?? 'null';
  const fields: string[] = [];
  for (const key of Object.keys(value).sort()) {
    const field = (value as Record<string, unknown>)[key];
    if (field !== undefined) fields.push(`${JSON.stringify(key)}:${canonical(field)}`);
  }
  return `{${fields.join(',')}}`;
}
