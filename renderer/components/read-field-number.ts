/** Reads a number typed into a field, with decimal point or comma; null for an empty field, undefined for anything else. */
export function readFieldNumber(written: string): number | null | undefined {
  const trimmed = written.trim().replaceAll('\u2212', '-').replace(',', '.');
  if (trimmed === '') return null;
  if (!/^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(trimmed)) return undefined;
  const value = Number(trimmed);
  return Number.isFinite(value) ? value : undefined;
}
