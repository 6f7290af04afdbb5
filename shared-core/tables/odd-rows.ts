import type { Cell, TableUnderstanding } from './types.ts';

const summaries =
  /^(mean|average|avg\.?|median|std\.?( ?dev\.?)?|standard deviation|max(imum)?|min(imum)?|sum|total|count|class (mean|average)|mittelwert|durchschnitt|summe|moyenne|[ée]cart[- ]type|promedio|media|literature( values?)?|literatur(wert)?|litt[ée]rature|literatura|reference|expected|answer key)\s*[:.]?$/i;

/** A row that sums up the others or holds handbook values is nobody's submission. */
export function isSummary(student: string): boolean {
  return summaries.test(student.trim());
}

/** A header that stands again among the rows (tables pasted one below the other). */
export function repeatsHeader(cells: readonly Cell[], understanding: TableUnderstanding): boolean {
  const filled = cells
    .map((c, i) => [c.text, understanding.columns[i]?.header ?? ''] as const)
    .filter(([t]) => t !== '');
  return (
    filled.length > 1 && filled.every(([text, header]) => header === text || header.startsWith(`${text} `))
  );
}
