import { gasNames, type GasName } from '../../electron/backend/example/constants.ts';
import { createRandom, type Random } from '../../electron/backend/example/random.ts';
import { simulateSpectrum, type SimulatedSpectrum } from '../../electron/backend/example/simulate.ts';
import type { Course } from '../../electron/backend/example/student-analysis.ts';
import type { StudentMethod } from '../../electron/backend/example/student-fit.ts';
import { columnUnit, type ReportUnits } from '../../electron/backend/example/student-report.ts';
import { slipCodes, slipStages, type SlipCode } from '../../electron/backend/example/student-slips.ts';
import { studentWork, type StudentWork } from '../../electron/backend/example/student.ts';
import type {
  MarkingScheme,
  QuantityRule,
  Submission,
  SubmittedValue,
} from '../../shared-core/marking/types.ts';
import type { PrescribedMethod } from '../../shared-core/reference/types.ts';
import type { QuantityKey, StandardUnit } from '../../shared-core/units/types.ts';

/** An invented submission with everything that is known about it. */
export interface SimulatedSubmission {
  readonly submission: Submission;
  readonly spectrum: SimulatedSpectrum;
  readonly course: Course;
  readonly scheme: MarkingScheme;
  readonly units: ReportUnits;
  readonly work: StudentWork;
  readonly slips: readonly SlipCode[];
  /** The same student with other slips: to see which slips look alike. */
  readonly again: (slips: readonly SlipCode[], seedOffset: number) => StudentWork;
}

export interface ClassOptions {
  readonly seed: number;
  readonly count: number;
  readonly method: StudentMethod;
  readonly gases: readonly ('HCl' | 'DCl')[];
  /** Share of submissions with slips. */
  readonly slipShare: number;
  readonly slipsEach: number;
  /** Fixed slips instead of drawn ones. */
  readonly slips?: readonly SlipCode[];
  /** Lines per branch; drawn from 7 to 12 where absent. */
  readonly largestM?: readonly number[];
  readonly lineRule?: MarkingScheme['lines'];
  /** What a submission says about its lines; drawn where absent. */
  readonly tells?: 'nothing' | 'count' | 'lines';
}

const methodOf: Readonly<Record<StudentMethod, readonly PrescribedMethod[]>> = {
  cubic: [{ fit: 'polynomial', degree: 3, distortion: 'tied' }],
  quadratic: [{ fit: 'polynomial', degree: 2, distortion: 'tied' }],
  'combination-differences': [{ fit: 'combination-differences', intercept: true, cubicTerm: false }],
  'combination-differences-through-origin': [
    { fit: 'combination-differences', intercept: false, cubicTerm: false },
  ],
  midpoint: [{ fit: 'midpoint' }, { fit: 'combination-differences', intercept: false, cubicTerm: false }],
};

/** Fair defaults of the trade, inside the mistake margins of HCl and DCl. */
const rules: Readonly<Partial<Record<QuantityKey, Omit<QuantityRule, 'key' | 'unit' | 'points'>>>> = {
  nu0: { full: { absolute: 0.5 }, part: { absolute: 1.5 }, leastFigures: 5, tellApart: [] },
  omegaE: { full: { relative: 0.001 }, part: { relative: 0.005 }, leastFigures: 4, tellApart: [] },
  B0: { full: { relative: 0.003 }, part: { relative: 0.009 }, leastFigures: 4, tellApart: [] },
  B1: { full: { relative: 0.003 }, part: { relative: 0.009 }, leastFigures: 4, tellApart: [] },
  Be: { full: { relative: 0.003 }, part: { relative: 0.009 }, leastFigures: 4, tellApart: ['b0-as-be'] },
  alphaE: { full: { relative: 0.03 }, part: { relative: 0.08 }, leastFigures: 3, tellApart: [] },
  D: { full: { relative: 0.15 }, part: { relative: 0.4 }, leastFigures: 1, tellApart: [] },
  re: { full: { relative: 0.002 }, part: { relative: 0.005 }, leastFigures: 4, tellApart: ['r0-as-re'] },
  r0: { full: { relative: 0.002 }, part: { relative: 0.005 }, leastFigures: 4, tellApart: [] },
  k: { full: { relative: 0.005 }, part: { relative: 0.02 }, leastFigures: 3, tellApart: [] },
};

export function schemeOf(course: Course, units: ReportUnits, lines: MarkingScheme['lines']): MarkingScheme {
  return {
    version: 1,
    title: 'simulated class',
    isotopologues: [course.isotopologue],
    masses: 'isotopic',
    methods: methodOf[course.method],
    lines,
    bondLengthFrom: 'Be',
    forceConstantFrom: course.forceConstantFrom,
    anharmonicityFrom: course.anharmonicityPerCm === null ? null : 'given',
    anharmonicityPerCm: course.anharmonicityPerCm,
    quantities: course.quantities.map((key) => ({
      key,
      unit: columnUnit(key, units),
      points: 1,
      ...rules[key]!,
    })),
    handItems: [],
    readingErrorPerCm: null,
    carryForward: true,
    oncePerCause: true,
    attempts: 'latest',
    due: null,
    lateness: null,
  };
}

const standardUnits: Readonly<Partial<Record<QuantityKey, StandardUnit>>> = { re: 'pm', r0: 'pm', k: 'N/m' };
const toStandard: Readonly<Record<string, number>> = {
  'cm-1': 1,
  pm: 1,
  Å: 100,
  nm: 1000,
  'N/m': 1,
  'mdyn/Å': 100,
};

/** A cell of the class as a reader of tables would understand it; the texts here are plain numbers. */
export function submittedValue(key: QuantityKey, text: string, unit: string): SubmittedValue {
  const factor = toStandard[unit];
  if (factor === undefined) throw new RangeError(`unit must be a column unit of the class, got ${unit}`);
  const [mantissa = '', exponent = '0'] = text.split('e');
  const digits = mantissa.replace(/[-+.]/g, '').replace(/^0+/, '');
  const decimals = mantissa.includes('.') ? mantissa.length - mantissa.indexOf('.') - 1 : 0;
  const lastDigit = 10 ** (Number(exponent) - decimals) * factor;
  return {
    isotopologue: null,
    quantity: key,
    text,
    value: Number(text) * factor,
    uncertainty: null,
    figures: digits.length,
    halfLastDigit: lastDigit / 2,
    unit,
    standardUnit: standardUnits[key] ?? 'cm-1',
    unreadableBecause: null,
  };
}

function courseOf(gas: 'HCl' | 'DCl', method: StudentMethod, random: Random): Course {
  const withVibration = method === 'cubic' && random.uniform() < 0.5;
  const quantities: QuantityKey[] = ['nu0', 'B0', 'B1', 'Be', 'alphaE', 're', 'k'];
  if (method === 'cubic') quantities.splice(5, 0, 'D');
  if (withVibration) quantities.splice(1, 0, 'omegaE');
  return {
    gas,
    isotopologue: gas === 'HCl' ? 'H35Cl' : 'D35Cl',
    method,
    forceConstantFrom: withVibration && random.uniform() < 0.5 ? 'omegaE' : 'nu0',
    anharmonicityPerCm: withVibration ? (gas === 'HCl' ? 52.8 : 27.2) : null,
    quantities,
  };
}

/** Slips that make sense in a course. */
export function slipsFor(course: Course): readonly SlipCode[] {
  return slipCodes.filter((code) => {
    if (code === 'k-from-nu0') return course.forceConstantFrom === 'omegaE';
    if (code === 'k-from-omega')
      return course.forceConstantFrom === 'nu0' && course.anharmonicityPerCm !== null;
    if (code === 'distortion-left-out' || code === 'branch-in-j') return course.method === 'cubic';
    if (code === 'origin-midpoint') return course.method !== 'midpoint';
    return true;
  });
}

function spectrumFor(gas: GasName, seed: number): SimulatedSpectrum {
  if (!gasNames.includes(gas)) throw new RangeError(`gas must be one of ${gasNames.join(', ')}, got ${gas}`);
  const random = createRandom(seed, 61);
  const [from, to] = gas === 'HCl' ? [2600, 3130] : [1890, 2260];
  return simulateSpectrum({
    seed,
    gases: [{ gas, peakAbsorbance: 3 * 3 ** random.uniform(), deviation: 1e-5 }],
    fromPerCm: from + random.uniform(),
    toPerCm: to + random.uniform(),
    resolutionPerCm: random.pick([0.5, 0.5, 1]),
    lorentzHalfWidthPerCm: random.between(0.03, 0.08),
    noise: random.between(4e-4, 1.5e-3),
    zeroFilling: random.pick([2, 4]),
    noiseModel: 'interferogram',
    scaleErrorPpm: random.between(-80, 80),
    baselineOffset: random.between(0, 0.1),
    baselineSlope: random.between(-0.03, 0.03),
  });
}

function drawSlips(options: ClassOptions, course: Course, random: Random): SlipCode[] {
  if (options.slips) return [...options.slips];
  if (random.uniform() >= options.slipShare) return [];
  const chosen = random.shuffled(slipsFor(course));
  const stage = (code: SlipCode): string =>
    Object.entries(slipStages).find(([, codes]) => (codes as readonly SlipCode[]).includes(code))![0];
  const slips: SlipCode[] = [];
  for (const code of chosen) {
    // Two slips of one stage could contradict each other.
    if (slips.length < options.slipsEach && !slips.some((other) => stage(other) === stage(code)))
      slips.push(code);
  }
  return slips;
}

/** A class of invented students, each with an own file; the same seed gives the same class. */
export function simulatedClass(options: ClassOptions): readonly SimulatedSubmission[] {
  return Array.from({ length: options.count }, (_, index) => {
    const seed = 10_000 * options.seed + index;
    const random = createRandom(seed, 62);
    const gas = options.gases[index % options.gases.length]!;
    const course = courseOf(gas, options.method, random);
    const units: ReportUnits = {
      length: random.pick(['pm', 'pm', 'Å', 'nm']),
      forceConstant: random.pick(['N/m', 'N/m', 'mdyn/Å']),
    };
    const spectrum = spectrumFor(gas, seed);
    const habits = {
      read: random.pick(['parabola', 'parabola', 'highest-point'] as const),
      readingErrorPerCm: random.between(0.005, 0.04),
      largestM: options.largestM ? random.pick(options.largestM) : 7 + random.below(6),
    };
    const again = (slips: readonly SlipCode[], seedOffset: number): StudentWork =>
      studentWork({ seed, slipSeed: seed + seedOffset, course, spectrum, habits, units, slips });
    let slips = drawSlips(options, course, random);
    let work = again(slips, 0);
    // A slip that leaves no trace in the cells (two equal digits exchanged) is no slip: draw again.
    for (let trial = 0; slips.length > 0 && !options.slips && trial < 20 && !visible(work); trial++) {
      slips = drawSlips({ ...options, slipShare: 1 }, course, random);
      work = again(slips, 0);
    }
    const tells = options.tells ?? random.pick(['nothing', 'nothing', 'count', 'lines'] as const);
    return {
      submission: submissionOf(index, course, units, work, tells),
      spectrum,
      course,
      scheme: schemeOf(course, units, options.lineRule ?? { rule: 'any' }),
      units,
      work,
      slips,
      again,
    };
  });
}

function visible(work: StudentWork): boolean {
  return Object.entries(work.texts).some(([key, text]) => work.unslippedTexts[key as QuantityKey] !== text);
}

function submissionOf(
  index: number,
  course: Course,
  units: ReportUnits,
  work: StudentWork,
  tells: 'nothing' | 'count' | 'lines',
): Submission {
  return {
    student: `T${1000 + index}`,
    name: null,
    group: null,
    attempt: 1,
    received: null,
    isotopologue: course.isotopologue,
    spectra: [`t${1000 + index}.csv`],
    values: (Object.entries(work.texts) as [QuantityKey, string][]).map(([key, text]) =>
      submittedValue(key, text, columnUnit(key, units)),
    ),
    lines:
      tells === 'lines'
        ? work.lines.map((line) => ({ isotopologue: null, m: line.m, wavenumberPerCm: line.wavenumberPerCm }))
        : [],
    lineCount: tells === 'count' ? work.lines.length : null,
  };
}
