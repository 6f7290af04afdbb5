import { unitOf } from '../../reference/methods/constants-by-method.ts';
import { quantityKeys, type QuantityKey } from '../../units/types.ts';
import type { SlipFinding } from '../types.ts';
import { slipNamed } from './catalogue.ts';
import { shown, shownWithUnit, symbols } from './numbers.ts';
import type { SubmissionVerdict } from './weigh-submission.ts';
import type { Verdict } from './weigh-slips.ts';

type Account = Verdict['accounts'][number];

/** A handbook value is an observation, not a slip: it competes as an explanation and is reported apart. */
export const handbookCode = 'value-from-literature';

/** An explanation is offered when the named causes together are likelier than correct work and unknown causes together. */
const offeredFrom = 0.5;
/** Less likely ones are not worth a line. */
const shownFrom = 0.02;
const mostFindings = 5;

const writtenSlips: Readonly<Record<string, string>> = {
  'digits-swapped': 'Two digits were exchanged in writing',
  'digit-lost': 'A digit was lost or mistyped in writing',
};

/**
 * Findings for one isotopologue: each code with its posterior probability (summed over the accounts that hold it), the quantities it
 * touches, the arithmetic, and what would tell it from its rivals. Empty where nothing earns it.
 */
function findingsOf(verdict: Verdict, isotopologue: string, fromOwnLines: boolean): SlipFinding[] {
  const byCode = new Map<string, { probability: number; best: Account }>();
  let named = 0;
  for (const account of verdict.accounts) {
    const codes = new Set(account.hypothesis.causes.map((c) => c.code).filter((c) => c !== handbookCode));
    if (codes.size > 0) named += account.probability;
    for (const code of codes) {
      const entry = byCode.get(code);
      if (entry === undefined) byCode.set(code, { probability: account.probability, best: account });
      else entry.probability += account.probability;
    }
  }
  if (named < offeredFrom) return [];
  const ranked = [...byCode]
    .sort(([, a], [, b]) => b.probability - a.probability)
    .filter(([, { probability }]) => probability >= shownFrom)
    .slice(0, mostFindings);
  return ranked.map(([code, { probability, best }]) => ({
    code,
    probability: Math.min(1, probability),
    isotopologue,
    quantities: touched(verdict, best, code),
    text: sentence(verdict, best, code, fromOwnLines),
    tellApart: rivals(code, best, ranked, verdict),
  }));
}

/** Findings from the table of lines (the first place where things go wrong) before those from the values. */
export function allFindings(verdict: SubmissionVerdict, isotopologue: string): SlipFinding[] {
  const fromValues = findingsOf(verdict.values, isotopologue, verdict.fromOwnLines);
  const fromLines = verdict.lines?.findings ?? [];
  const codes = new Set(fromLines.map((f) => f.code));
  return [...fromLines, ...fromValues.filter((f) => !codes.has(f.code))];
}

/** Probability that a value was taken from a handbook. */
export function handbookProbability(verdict: Verdict): number {
  return verdict.accounts
    .filter((a) => a.hypothesis.causes.some((c) => c.code === handbookCode))
    .reduce((sum, a) => sum + a.probability, 0);
}

/** Quantities that the likeliest account with a handbook takes from it. */
export function copiedKeys(verdict: Verdict): ReadonlySet<QuantityKey> {
  return verdict.accounts.find((a) => a.hypothesis.copied.size > 0)?.hypothesis.copied ?? new Set();
}

/** Submitted quantities that the account moves away from correct work and explains. */
function touched(verdict: Verdict, account: Account, code: string): QuantityKey[] {
  const cause = account.hypothesis.causes.find((c) => c.code === code);
  if (cause?.only !== undefined) return [cause.only];
  return verdict.bench.fields
    .filter((f) => {
      const value = account.predicted[f.key];
      if (value === undefined || account.unexplained.includes(f.key) || account.hypothesis.free.has(f.key))
        return false;
      const ownStep = cause?.moves?.has(f.key) ?? true;
      return (
        ownStep &&
        Math.abs(value - verdict.bench.correct.values[f.key]!) > Math.max(f.halfWidth, 2e-6 * Math.abs(value))
      );
    })
    .map((f) => f.key);
}

function sentence(verdict: Verdict, account: Account, code: string, fromOwnLines: boolean): string {
  const cause = account.hypothesis.causes.find((c) => c.code === code)!;
  const what = slipNamed(code)?.what ?? writtenSlips[code] ?? code;
  const keys = touched(verdict, account, code);
  const arithmetic = keys.slice(0, 4).map((key) => {
    const field = verdict.bench.fields.find((f) => f.key === key)!;
    const unit = unitOf(key);
    const meant = account.hypothesis.meant.get(key);
    const correct = verdict.bench.correct.values[key]!;
    if (meant !== undefined) return `${symbols[key]}: ${field.submitted.text} for ${shown(meant)}`;
    return `${symbols[key]}: submitted ${shown(field.value)}, this step gives ${shown(account.predicted[key]!)}, ${fromOwnLines ? 'correct work from the lines handed in' : 'correct work'} ${shownWithUnit(correct, unit)}`;
  });
  const rest = account.unexplained.map((key) => symbols[key]);
  return [
    `${what} (${cause.formula}).`,
    arithmetic.length > 0 ? `${arithmetic.join('; ')}.` : '',
    rest.length > 0 ? `It leaves ${rest.join(', ')} unexplained.` : '',
  ]
    .filter((s) => s !== '')
    .join(' ');
}

/** Rivals that are not far behind (or ahead), and a quantity in which they differ. */
function rivals(
  code: string,
  best: Account,
  ranked: readonly (readonly [string, { probability: number; best: Account }])[],
  verdict: Verdict,
): string | null {
  const own = ranked.find(([c]) => c === code)![1];
  const others = ranked.filter(
    ([c, { probability, best: b }]) =>
      c !== code &&
      b !== best &&
      !b.hypothesis.causes.some((x) => x.code === code) &&
      probability > 0.1 * own.probability,
  );
  if (others.length === 0) return null;
  return others.map(([c, { best: other }]) => `${c}: ${difference(best, other, verdict)}`).join(' ');
}

function difference(a: Account, b: Account, verdict: Verdict): string {
  const submitted = new Map(verdict.bench.fields.map((f, i) => [f.key, verdict.bench.generous[i]!]));
  const apart = quantityKeys.flatMap((key) => {
    const [x, y] = [a.predicted[key], b.predicted[key]];
    if (x === undefined || y === undefined) return [];
    const relative = Math.abs(x - y) / Math.max(Math.abs(x), Math.abs(y), 1e-300);
    const scale = submitted.get(key);
    const size = scale === undefined ? relative / 2e-3 : Math.abs(x - y) / scale;
    return size > 1 ? [{ key, x, y, size, asked: scale === undefined }] : [];
  });
  const best = apart.sort((p, q) => Number(q.asked) - Number(p.asked) || q.size - p.size)[0];
  if (best === undefined) return 'the same numbers; the written working or the table of lines would tell.';
  return `${symbols[best.key]} would be ${shown(best.x)} here and ${shown(best.y)} there.`;
}
