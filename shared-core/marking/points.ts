import type { Agreement, QuantityRule } from './types.ts';

/**
 * Points of a compared value: all within; in the range of part credit half of them ('stepped'), or falling in a straight line from all
 * at the full tolerance to none at the part tolerance ('sliding'); none outside. Rounded to 0.01.
 */
export function pointsFor(
  rule: QuantityRule,
  agreement: Agreement,
  deviation: number,
  tolerance: { readonly full: number; readonly part: number | null },
): number {
  switch (agreement) {
    case 'within':
      return rule.points;
    case 'part credit':
      return rule.partCredit === 'sliding'
        ? sliding(rule.points, Math.abs(deviation), tolerance)
        : rule.points / 2;
    default:
      return 0;
  }
}

function sliding(points: number, off: number, { full, part }: { full: number; part: number | null }): number {
  if (part === null || part <= full) return points / 2;
  const share = Math.min(1, Math.max(0, (part - off) / (part - full)));
  return Math.round(100 * points * share) / 100;
}
