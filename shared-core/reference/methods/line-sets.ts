import type { LineRule } from '../types.ts';
import type { MethodLine } from './method-line.ts';

/** Fewest lines of a branch in an admissible set; a branch that shows fewer enters whole. */
const fewestASide = 5;
/** Students stop both branches about where the lines fade: sets further out of balance are not counted as admissible. */
const largestImbalance = 4;

/** A line of one band as the reference holds it, with what matters for the choice of lines. */
export interface CandidateLine extends MethodLine {
  readonly used: boolean;
  readonly blended: boolean;
  readonly saturated: boolean;
}

/** A choice of lines that correct work may have made. */
export interface LineSet {
  readonly label: string;
  readonly lines: readonly MethodLine[];
}

/** What is known of a student's choice: the m of the lines handed in, or their number, or nothing. */
export type KnownChoice =
  | { readonly known: 'lines'; readonly ms: readonly number[] }
  | { readonly known: 'count'; readonly count: number }
  | { readonly known: 'nothing' };

/**
 * Line sets that correct work may have used, in order of what is known: the lines handed in; the scheme's range; the number of lines;
 * else every set from five a side up to all that the file shows, without gaps except at blended or saturated lines.
 *
 * @param candidates lines of one band of one isotopologue, any order.
 * @returns at least one set where there is any line; the largest set comes first.
 */
export function admissibleLineSets(
  candidates: readonly CandidateLine[],
  rule: LineRule,
  choice: KnownChoice = { known: 'nothing' },
): LineSet[] {
  const lines = candidates.filter((l) => l.used || l.blended || l.saturated).sort((a, b) => a.m - b.m);
  if (choice.known === 'lines') {
    const wanted = new Set(choice.ms);
    const chosen = lines.filter((l) => wanted.has(l.m));
    if (chosen.length > 0) return [{ label: 'the lines handed in', lines: chosen }];
  }
  const variants = withAndWithoutDoubtful(lines);
  if (rule.rule === 'up-to') {
    return distinct(
      variants.map((v) => ({
        label: `|m| up to ${rule.m}`,
        lines: v.filter((l) => Math.abs(l.m) <= rule.m),
      })),
    );
  }
  const sets = variants.flatMap((v) => grid(v));
  if (choice.known === 'count') {
    const ofThatNumber = sets.filter((s) => s.lines.length === choice.count);
    if (ofThatNumber.length > 0) return distinct(ofThatNumber);
  }
  return distinct(sets);
}

/** All lines, and those neither blended nor saturated nor left out. */
function withAndWithoutDoubtful(lines: readonly CandidateLine[]): CandidateLine[][] {
  const clean = lines.filter((l) => l.used && !l.blended && !l.saturated);
  return clean.length === lines.length || clean.length === 0 ? [[...lines]] : [[...lines], clean];
}

function grid(lines: readonly CandidateLine[]): LineSet[] {
  const r = lines.filter((l) => l.m > 0).sort((a, b) => a.m - b.m);
  const p = lines.filter((l) => l.m < 0).sort((a, b) => b.m - a.m);
  const sets: LineSet[] = [];
  for (const np of counts(p.length)) {
    for (const nr of counts(r.length)) {
      const balanced = Math.abs(np - nr) <= largestImbalance;
      const otherBranchUsedUp = (np === p.length && nr > np) || (nr === r.length && np > nr);
      if (!balanced && !otherBranchUsedUp) continue;
      sets.push({
        label: `${np} P and ${nr} R lines`,
        lines: [...p.slice(0, np), ...r.slice(0, nr)],
      });
    }
  }
  return sets;
}

/** Largest first. */
function counts(available: number): number[] {
  if (available <= fewestASide) return [available];
  return Array.from({ length: available - fewestASide + 1 }, (_, i) => available - i);
}

function distinct(sets: readonly LineSet[]): LineSet[] {
  const seen = new Set<string>();
  return sets.filter((set) => {
    const key = set.lines.map((l) => l.m).join(' ');
    if (set.lines.length === 0 || seen.has(key)) return false;
    seen.add(key);
    return true;
  });
}
