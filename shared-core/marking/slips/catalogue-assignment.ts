import type { MethodLine } from '../../reference/methods/method-line.ts';
import { reducedMassU as reducedMassOf } from '../../molecule/isotopologue.ts';
import {
  carriedOn,
  needing,
  type ReplayedLines,
  type SlipDefinition,
  type SlipVariant,
} from './definition.ts';

type Lines = readonly MethodLine[];

/** Slips made when lines are numbered or chosen: replayed on the reference lines. */
export const assignmentSlips: readonly SlipDefinition[] = [
  numbering('numbering-all-shift', 2, 'Every line was numbered one too high or one too low in m', [
    ['every m one too high', (m) => m + 1],
    ['every m one too low', (m) => m - 1],
  ]),
  numbering('branches-swapped', 1, 'The P and R branches were exchanged', [['m taken as −m', (m) => -m]]),
  numbering('numbering-r-from-zero', 2, 'The R branch was numbered with m = J in place of J + 1', [
    ['R: m = J', (m) => (m > 0 ? m - 1 : m)],
  ]),
  numbering('numbering-r-shift', 1, 'The R branch was numbered one too high', [
    ['R: m + 1', (m) => (m > 0 ? m + 1 : m)],
  ]),
  numbering('numbering-p-shift', 1, 'The P branch was numbered one too high', [
    ['P: J + 1', (m) => (m < 0 ? m - 1 : m)],
  ]),
  numbering('numbering-p-from-zero', 1, 'P(1) was called P(0)', [['P: J − 1', (m) => (m < 0 ? m + 1 : m)]]),
  numbering('numbering-both-high', 1, 'Both branches were numbered one too high', [
    ['|m| + 1', (m) => m + Math.sign(m)],
  ]),
  {
    code: 'numbering-first-missed',
    family: 'assignment',
    weight: 1,
    what: 'The first line of both branches was missed',
    variants: () => [
      replay('R(0) and P(1) left out, |m| − 1', (lines) =>
        renumber(
          lines.filter((l) => Math.abs(l.m) > 1),
          (m) => m - Math.sign(m),
        ),
      ),
    ],
  },
  {
    code: 'numbering-line-skipped',
    family: 'assignment',
    weight: 0.6,
    what: 'One line inside a branch was skipped, and the later labels slipped by one',
    variants: ({ linesASide }) => skippedAt(Math.min(9, Math.max(...linesASide) - 1)),
  },
  {
    code: 'isotope-heavy-lines',
    family: 'assignment',
    weight: 2,
    what: 'The lines of the heavier isotopologue were measured',
    variants: ({ otherHeavy, settings }) =>
      otherHeavy === null
        ? []
        : [
            replay(`lines of ${otherHeavy.isotopologue.name}`, (lines) =>
              sameMs(lines, byMOnce(otherHeavy.lines)),
            ),
            {
              ...replay(`lines and mass of ${otherHeavy.isotopologue.name}`, (lines) =>
                sameMs(lines, byMOnce(otherHeavy.lines)),
              ),
              steps: { mu: () => reducedMassOf(otherHeavy.isotopologue, settings.masses) },
            },
          ],
  },
  {
    code: 'isotope-averaged',
    family: 'assignment',
    weight: 1,
    what: 'The two isotopic lines of each doublet were averaged',
    variants: ({ otherHeavy }) =>
      otherHeavy === null
        ? []
        : [0.5, 0.24].map((f) =>
            replay(`${f} of the way to ${otherHeavy.isotopologue.name}`, (lines) =>
              averaged(lines, byMOnce(otherHeavy.lines), f),
            ),
          ),
  },
  {
    code: 'isotope-branch-mixed',
    family: 'assignment',
    weight: 0.6,
    what: 'One branch was measured on the other isotopologue',
    variants: ({ otherHeavy }) =>
      otherHeavy === null
        ? []
        : ([1, -1] as const).map((side) =>
            replay(`${side > 0 ? 'R' : 'P'} branch of ${otherHeavy.isotopologue.name}`, (lines) =>
              exchanged(lines, byMOnce(otherHeavy.lines), (m) => m * side > 0),
            ),
          ),
  },
  {
    code: 'isotope-parity',
    family: 'assignment',
    weight: 0.5,
    what: 'From some line on the other member of the doublet was measured',
    variants: ({ otherHeavy, linesASide }) =>
      otherHeavy === null
        ? []
        : [3, 5, 7]
            .filter((from) => from < Math.max(...linesASide))
            .flatMap((from) =>
              [0, 1, -1].map((side) =>
                replay(`from |m| = ${from} on${side === 0 ? '' : side > 0 ? ' in R' : ' in P'}`, (lines) =>
                  exchanged(
                    lines,
                    byMOnce(otherHeavy.lines),
                    (m) => Math.abs(m) >= from && (side === 0 || m * side > 0),
                  ),
                ),
              ),
            ),
  },
  {
    code: 'maxima-read',
    family: 'assignment',
    weight: 1,
    what: 'The maxima between the lines were read as lines',
    variants: () => [
      replay('each halfway to the next higher line', (lines) => halfway(lines, 1)),
      replay('each halfway to the next lower line', (lines) => halfway(lines, -1)),
    ],
  },
  {
    code: 'category-axis',
    family: 'assignment',
    weight: 0.6,
    what: 'The fit ran over row numbers, not over m',
    variants: () => [
      replay('rows counted upwards', (lines) => rows(lines, 1)),
      replay('rows counted downwards', (lines) => rows(lines, -1)),
    ],
  },
  {
    code: 'band-other-isotope',
    family: 'assignment',
    weight: 0.6,
    what: 'The band of the gas with the other hydrogen was measured',
    variants: ({ otherLight }) =>
      otherLight === null
        ? []
        : [
            replay(`lines of ${otherLight.isotopologue.name}`, (lines) => ({
              lines: withinRange(lines, otherLight.lines),
              method: null,
            })),
          ],
  },
  {
    code: 'band-overtone',
    family: 'assignment',
    weight: 0.3,
    what: 'The overtone was taken for the fundamental',
    variants: ({ overtone }) =>
      overtone === null
        ? []
        : [replay('lines of 2←0', (lines) => ({ lines: withinRange(lines, overtone), method: null }))],
  },
  {
    code: 'differences-mispaired',
    family: 'assignment',
    weight: 1,
    what: 'Upper-state and lower-state combination differences were exchanged',
    variants: ({ method }) =>
      method.fit === 'combination-differences'
        ? [
            carriedOn('B_0 ↔ B_1, αe negative', {
              B0: (_, c) => c.read.Bn ?? null,
              B1: (_, c) => c.read.B0 ?? null,
            }),
            carriedOn('B_0 ↔ B_1, αe made positive', {
              B0: (_, c) => c.read.Bn ?? null,
              B1: (_, c) => c.read.B0 ?? null,
              alphaE: needing(['B0', 'B1'], ({ B0, B1 }) => Math.abs(B0 - B1)),
            }),
          ]
        : [],
  },
];

function replay(formula: string, f: (lines: Lines) => ReplayedLines | null): SlipVariant {
  return { formula, replay: f, carried: true };
}

function numbering(
  code: string,
  weight: number,
  what: string,
  ways: readonly (readonly [string, (m: number) => number])[],
): SlipDefinition {
  return {
    code,
    family: 'assignment',
    weight,
    what,
    variants: () => ways.map(([formula, change]) => replay(formula, (lines) => renumber(lines, change))),
  };
}

function renumber(lines: Lines, change: (m: number) => number): ReplayedLines {
  return { lines: lines.map((l) => ({ ...l, m: change(l.m) })), method: null };
}

function skippedAt(last: number): SlipVariant[] {
  const places = Array.from({ length: Math.max(0, last - 1) }, (_, i) => i + 2);
  return places.flatMap((place) =>
    ([1, -1] as const).map((side) =>
      replay(side > 0 ? `R(${place - 1}) skipped` : `P(${place}) skipped`, (lines) => {
        const m0 = side * place;
        if (!lines.some((l) => l.m * side > place)) return null;
        return renumber(
          lines.filter((l) => l.m !== m0),
          (m) => (m * side > place ? m - side : m),
        );
      }),
    ),
  );
}

type ByM = ReadonlyMap<number, MethodLine>;

const maps = new WeakMap<Lines, ByM>();

/** The same map for the same lines: replays ask for it thousands of times. */
function byMOnce(lines: Lines): ByM {
  const known = maps.get(lines) ?? byM(lines);
  maps.set(lines, known);
  return known;
}

function byM(lines: Lines): Map<number, MethodLine> {
  return new Map(lines.map((l) => [l.m, l]));
}

/** The other isotopologue's lines with the same m; null where it has too few of them. */
function sameMs(lines: Lines, other: ByM): ReplayedLines | null {
  const found = lines.flatMap((l) => other.get(l.m) ?? []);
  return found.length >= 6 && 2 * found.length > lines.length ? { lines: found, method: null } : null;
}

function averaged(lines: Lines, other: ByM, f: number): ReplayedLines | null {
  const found = lines.flatMap((l) => {
    const o = other.get(l.m);
    return o === undefined
      ? []
      : { ...l, wavenumberPerCm: (1 - f) * l.wavenumberPerCm + f * o.wavenumberPerCm };
  });
  return found.length >= 6 ? { lines: found, method: null } : null;
}

function exchanged(lines: Lines, other: ByM, which: (m: number) => boolean): ReplayedLines | null {
  const found = lines.flatMap((l) => (which(l.m) ? (other.get(l.m) ?? []) : l));
  return found.length >= 6 && found.some((l) => which(l.m)) ? { lines: found, method: null } : null;
}

/** Between ν̃(m) and the next line in that direction (across the gap: the middle of the gap), labelled m. */
function halfway(lines: Lines, direction: 1 | -1): ReplayedLines | null {
  const index = byM(lines);
  const found = lines.flatMap((l) => {
    const next = index.get(l.m + direction);
    return next === undefined
      ? []
      : { ...l, wavenumberPerCm: (l.wavenumberPerCm + next.wavenumberPerCm) / 2 };
  });
  return found.length >= 6 ? { lines: found, method: null } : null;
}

function rows(lines: Lines, direction: 1 | -1): ReplayedLines {
  const sorted = [...lines].sort((a, b) => direction * (a.wavenumberPerCm - b.wavenumberPerCm));
  return { lines: sorted.map((l, i) => ({ ...l, m: i + 1 })), method: null };
}

function withinRange(lines: Lines, others: Lines): Lines {
  const [low, high] = [Math.min(...lines.map((l) => l.m)), Math.max(...lines.map((l) => l.m))];
  return others.filter((l) => l.m >= low && l.m <= high);
}
