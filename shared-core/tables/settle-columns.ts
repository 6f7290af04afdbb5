import { quantities } from '../units/index.ts';
import type { ColumnRole, ColumnUnderstanding, TableKind } from './types.ts';
import { understandHeader } from './understand-header.ts';

const same = (a: ColumnRole, b: ColumnRole): boolean =>
  a.role === b.role &&
  (a.role !== 'quantity' ||
    b.role !== 'quantity' ||
    (a.quantity === b.quantity && a.isotopologue === b.isotopologue));

/**
 * Settles columns against each other: one student key, no quantity twice, an uncertainty or literature value only beside a value. What a
 * person has set (`isSet`) stays.
 */
export function settleColumns(
  columns: readonly ColumnUnderstanding[],
  kind: TableKind,
  isSet: (column: ColumnUnderstanding) => boolean,
): ColumnUnderstanding[] {
  const keyed = oneKey(columns, isSet);
  return keyed.map((column): ColumnUnderstanding => {
    if (isSet(column)) return column;
    const twins = keyed.filter((c) => c.index !== column.index && same(c.role, column.role));
    if (column.role.role === 'quantity' && twins.length > 0) {
      const symbol = quantities[column.role.quantity].symbol;
      const reason = `${column.reason}; column ${twins.map((c) => c.index + 1).join(', ')} is ${symbol} too: say which counts`;
      return {
        ...column,
        ambiguous: true,
        reason,
        alternatives: [...column.alternatives, { role: 'ignore' }],
      };
    }
    if (
      ['spectrum', 'isotopologue', 'attempt', 'received', 'value', 'quantity-name'].includes(
        column.role.role,
      ) &&
      twins.length > 0
    ) {
      if (column.role.role === 'spectrum') return column;
      return {
        ...column,
        ambiguous: true,
        reason: `${column.reason}; there are several such columns: say which counts`,
        alternatives: [{ role: 'ignore' }],
      };
    }
    return asked(column, keyed, kind);
  });
}

/** A column beside a value whose value is nowhere may be the value after all. */
function asked(
  column: ColumnUnderstanding,
  columns: readonly ColumnUnderstanding[],
  kind: TableKind,
): ColumnUnderstanding {
  const { beside } = understandHeader(column.header);
  if (beside === null || column.role.role === 'quantity' || kind === 'lines') return column;
  const hasValue = columns.some((c) => c.role.role === 'quantity' && c.role.quantity === beside.quantity);
  return hasValue
    ? column
    : { ...column, ambiguous: true, reason: `${column.reason}; no other column holds the value` };
}

/** How surely a header names the student key: a key of the student, a bare key, an address. */
function rank(header: string): number {
  if (/e-?mail|courriel|correo/i.test(header)) return 3;
  if (/^(id|key|user.*|cl[ée]|clave|kennung)$/i.test(header.trim())) return 2;
  return 1;
}

function oneKey(
  columns: readonly ColumnUnderstanding[],
  isSet: (column: ColumnUnderstanding) => boolean,
): ColumnUnderstanding[] {
  const keys = columns.filter((c) => c.role.role === 'student');
  if (keys.length < 2) return [...columns];
  const chosenByHand = keys.filter(isSet);
  const best = Math.min(...keys.map((c) => rank(c.header)));
  const first = chosenByHand.length > 0 ? chosenByHand : keys.filter((c) => rank(c.header) === best);
  return columns.map((c): ColumnUnderstanding => {
    if (c.role.role !== 'student' || isSet(c)) return c;
    if (first.length === 1 && c === first[0]) return c;
    if (first.includes(c))
      return {
        ...c,
        ambiguous: true,
        reason: `${c.reason}; there are several student keys: say which counts`,
        alternatives: [{ role: 'ignore' }],
      };
    return {
      ...c,
      role: { role: 'ignore' },
      reason: `${c.reason}, but “${first[0]!.header}” is the student key`,
      alternatives: [{ role: 'student' }],
    };
  });
}
