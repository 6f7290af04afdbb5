import type { QuantityKey } from '../../../shared-core/units/types.ts';
import { isotopologuesOf, type GasName } from './constants.ts';
import type { Random } from './random.ts';
import type { ReadLine } from './student-reading.ts';
import { fitByMethod, trendLine, type StudentFit, type StudentMethod } from './student-fit.ts';
import type { SlipCode } from './student-slips.ts';

/** What an invented course asks for and prescribes. */
export interface Course {
  readonly gas: GasName;
  /** Name of the isotopologue asked for. */
  readonly isotopologue: string;
  readonly method: StudentMethod;
  readonly forceConstantFrom: 'nu0' | 'omegaE';
  /** Anharmonicity that the handout supplies, cm-1; null: none. */
  readonly anharmonicityPerCm: number | null;
  readonly quantities: readonly QuantityKey[];
}

export type StudentValues = Partial<Record<QuantityKey, number>>;

/** Lines of the isotopologue asked for and of its heavier partner, both as read off the file. */
export interface StudentLines {
  readonly asked: readonly ReadLine[];
  readonly heavy: readonly ReadLine[];
}

const planck = 6.62607015e-34;
const lightCm = 29979245800;
const massUnit = 1.66053906892e-27;

/** The lines as the student numbers them. */
export function slippedLines(
  lines: StudentLines,
  has: (code: SlipCode) => boolean,
  random: Random,
): readonly ReadLine[] {
  let used = lines.asked;
  if (has('isotope-heavy-lines')) used = lines.heavy;
  if (has('isotope-averaged')) {
    used = lines.asked.flatMap((line) => {
      const partner = lines.heavy.find((each) => each.m === line.m);
      return partner
        ? [{ ...line, wavenumberPerCm: (line.wavenumberPerCm + partner.wavenumberPerCm) / 2 }]
        : [];
    });
  }
  if (has('maxima-read')) used = betweenLines(used, random);
  const renumber = (change: (m: number) => number): readonly ReadLine[] =>
    used.map((line) => ({ ...line, m: change(line.m) }));
  if (has('numbering-all-shift')) {
    const shift = random.uniform() < 0.5 ? 1 : -1;
    used = renumber((m) => m + shift);
  }
  if (has('branches-swapped')) used = renumber((m) => -m);
  if (has('numbering-r-from-zero')) used = renumber((m) => (m > 0 ? m - 1 : m));
  if (has('numbering-r-shift')) used = renumber((m) => (m > 0 ? m + 1 : m));
  if (has('numbering-p-shift')) used = renumber((m) => (m < 0 ? m - 1 : m));
  return used;
}

/** Places between neighbouring lines taken for lines: every number is off by a half. */
function betweenLines(lines: readonly ReadLine[], random: Random): readonly ReadLine[] {
  const outward = random.uniform() < 0.5;
  return lines.flatMap((line) => {
    const next = lines.find((each) => each.m === line.m + (outward ? 1 : -1));
    if (!next) return [];
    const middle = (line.wavenumberPerCm + next.wavenumberPerCm) / 2 + 0.15 * random.normal();
    return [{ m: line.m, wavenumberPerCm: middle }];
  });
}

function slippedFit(
  lines: readonly ReadLine[],
  course: Course,
  has: (code: SlipCode) => boolean,
): StudentFit {
  if (has('branch-in-j')) {
    const r = lines.filter((line) => line.m > 0).map((line) => ({ ...line, m: line.m - 1 }));
    const degree = course.method === 'quadratic' ? 2 : 3;
    const [c0 = NaN, c1 = NaN, c2 = NaN, c3 = 0] = trendLine(r, degree);
    const distortion = degree === 3 ? -c3 / 4 : null;
    return { origin: c0, lower: (c1 - c2) / 2, upper: (c1 + c2) / 2, distortion };
  }
  if (has('distortion-left-out')) return fitByMethod(lines, 'quadratic');
  return fitByMethod(lines, course.method);
}

interface Rotation {
  readonly b0: number;
  readonly b1: number;
  readonly be: number;
  readonly alphaE: number;
}

/** From B_0 and B_1 to Be and alphaE, with what goes wrong on the way carried along. */
function rotation(fit: StudentFit, has: (code: SlipCode) => boolean, random: Random): Rotation {
  let { lower: b0, upper: b1 } = fit;
  const throughB0 = random.uniform() < 0.5;
  const carried = random.uniform() < 0.7;
  let alphaE = b0 - b1;
  const mean = (b0 + b1) / 2;
  const right = b0 + alphaE / 2;
  if (has('bbar-as-b0')) {
    b0 = mean;
    b1 = mean - alphaE;
    return { b0, b1, alphaE, be: mean + alphaE / 2 };
  }
  if (has('spacing-2b-as-b')) return { b0: 2 * b0, b1: 2 * b1, alphaE, be: 2 * b0 + alphaE / 2 };
  if (has('spacing-2b-as-4b')) return { b0: b0 / 2, b1: b1 / 2, alphaE, be: b0 / 2 + alphaE / 2 };
  if (has('alpha-sign')) alphaE = -alphaE;
  if (has('alpha-half')) alphaE /= 2;
  if (has('alpha-double')) alphaE *= 2;
  const slipped = has('alpha-sign') || has('alpha-half') || has('alpha-double');
  let be = slipped && carried ? (throughB0 ? b0 + alphaE / 2 : mean + alphaE) : right;
  if (has('bbar-as-be')) be = mean;
  if (has('b0-as-be')) be = b0;
  if (has('b1-as-be')) be = b1;
  if (has('be-minus-half-alpha')) be = b0 - alphaE / 2;
  if (has('be-plus-alpha')) be = b0 + alphaE;
  return { b0, b1, be, alphaE };
}

/** Reduced mass in u that the student uses. */
export function studentMass(course: Course, has: (code: SlipCode) => boolean): number {
  const list = isotopologuesOf(course.gas);
  const own = list.find((each) => each.name === course.isotopologue) ?? list[0]!;
  const [light, heavy] = atomsOf(course, own.name);
  const product = (a: number, b: number): number => (a * b) / (a + b);
  if (has('mass-average')) return product(light.average, heavy.average);
  if (has('mass-integer')) return product(light.integer, heavy.integer);
  if (has('mass-other-isotope')) return list.find((each) => each !== own)?.reducedMassU ?? own.reducedMassU;
  if (has('mass-sum')) return light.exact + heavy.exact;
  if (has('mass-light-atom')) return light.exact;
  if (has('mass-grams')) return own.reducedMassU * 1000;
  return own.reducedMassU;
}

interface AtomMasses {
  readonly exact: number;
  readonly average: number;
  readonly integer: number;
}
/** Masses off a periodic table; averages: IUPAC conventional atomic weights. */
function atomsOf(course: Course, name: string): readonly [AtomMasses, AtomMasses] {
  const own = isotopologuesOf(course.gas).find((each) => each.name === name)!;
  const averages: Record<string, number> = { H: 1.008, D: 2.0141, Cl: 35.453, Br: 79.904, F: 18.998, I: 126.904, C: 12.011, O: 15.999 }; // prettier-ignore
  const [, first = '', second = ''] = /^(\d*[A-Z][a-z]?)(\d+[A-Z][a-z]?)$/.exec(name) ?? [];
  const symbol = (nuclide: string): string => nuclide.replace(/\d/g, '');
  const integer = (nuclide: string): number =>
    nuclide === 'H' ? 1 : nuclide === 'D' ? 2 : Number.parseInt(nuclide, 10);
  // Exact masses follow from the sum and the product that the table of isotopologues holds.
  const half = own.massU / 2;
  const spread = Math.sqrt(Math.max(0, half ** 2 - own.reducedMassU * own.massU));
  return [
    { exact: half - spread, average: averages[symbol(first)]!, integer: integer(first) },
    { exact: half + spread, average: averages[symbol(second)]!, integer: integer(second) },
  ];
}

/** Bond length in pm from B in cm-1: r = sqrt(h/(8 pi^2 c mu B)). */
function bondLength(b: number, massU: number, has: (code: SlipCode) => boolean): number {
  const h = has('hbar-for-h') ? planck / (2 * Math.PI) : planck;
  const pi = has('pi-eight') ? 8 * Math.PI : 8 * Math.PI ** 2;
  const c = has('c-in-m') ? lightCm / 100 : lightCm;
  // Who gets a negative B from swapped branches still computes a length.
  const inertia = h / (pi * c * Math.abs(b));
  const square = inertia / (massU * massUnit);
  // A student who forgets the root still writes the number down as a length: square angstrom read as angstrom.
  return has('r-root-missed') ? square * 1e20 * 100 : Math.sqrt(square) * 1e12;
}

/** Force constant in N/m: k = 4 pi^2 c^2 mu nu^2. */
function forceConstant(wavenumber: number, massU: number, has: (code: SlipCode) => boolean): number {
  const twoPi = has('k-no-two-pi') ? 1 : has('k-one-two-pi') ? Math.sqrt(2 * Math.PI) : 2 * Math.PI;
  const c = has('c-in-m') ? lightCm / 100 : lightCm;
  return (twoPi * c * wavenumber) ** 2 * massU * massUnit;
}

/**
 * From lines to the values that are handed in, in standard units, before rounding. Every slip acts at its own step and is
 * carried through all later ones.
 */
export function analyse(
  lines: StudentLines,
  course: Course,
  slips: ReadonlySet<SlipCode>,
  random: Random,
): StudentValues {
  const has = (code: SlipCode): boolean => slips.has(code);
  const used = slippedLines(lines, has, random);
  const fit = slippedFit(used, course, has);
  const { b0, b1, be, alphaE } = rotation(fit, has, random);
  const at = (m: number): number => used.find((line) => line.m === m)?.wavenumberPerCm ?? fit.origin;
  let nu0 = fit.origin;
  if (has('origin-midpoint')) nu0 = (at(1) + at(-1)) / 2;
  if (has('origin-line')) nu0 = random.uniform() < 0.5 ? at(1) : at(-1);
  const omegaExe = course.anharmonicityPerCm;
  const omegaE = omegaExe === null ? null : nu0 + 2 * omegaExe;
  const massU = studentMass(course, has);
  const rightForK = course.forceConstantFrom === 'omegaE' ? (omegaE ?? nu0) : nu0;
  const forK = has('k-from-nu0') ? nu0 : has('k-from-omega') ? (omegaE ?? nu0) : rightForK;
  const all: StudentValues = {
    nu0,
    B0: b0,
    B1: b1,
    Be: be,
    alphaE,
    ...(fit.distortion === null ? {} : { D: fit.distortion }),
    ...(omegaE === null || omegaExe === null ? {} : { omegaE, omegaExe }),
    r0: bondLength(b0, massU, has),
    re: bondLength(has('r0-as-re') ? b0 : be, massU, has),
    k: forceConstant(forK, massU, has),
  };
  return Object.fromEntries(
    course.quantities.filter((key) => all[key] !== undefined).map((key) => [key, all[key]]),
  );
}
