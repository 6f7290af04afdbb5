import type { QuantityKey } from '../../../shared-core/units/types.ts';
import type { GasOptions } from './bands.ts';
import { fileStyles, writeSpectrum } from './file-writer.ts';
import { createRandom, type Random } from './random.ts';
import { sectionPlan, sectionScheme, slipWords, type PlannedSubmission } from './section-plan.ts';
import { simulateSpectrum, type SimulatedSpectrum } from './simulate.ts';
import type { Course } from './student-analysis.ts';
import { columnUnit, type ReportUnits } from './student-report.ts';
import { studentWork, type StudentWork } from './student.ts';

export interface ExampleFile {
  /** With folders, "/" between them. */
  readonly name: string;
  readonly bytes: Uint8Array;
}

/** What was put into one submission. */
export interface ExampleTruth {
  readonly student: string;
  readonly isotopologue: string;
  readonly spectrum: string;
  /** Slip codes; empty: honest work. */
  readonly slips: readonly string[];
  /** True constants of the asked isotopologue on the file's own axis, cm-1. */
  readonly bandOriginPerCm: number;
  readonly rotationalConstantEquilibriumPerCm: number;
  readonly alphaEPerCm: number;
}

export interface ExampleSection {
  readonly files: readonly ExampleFile[];
  readonly truth: readonly ExampleTruth[];
}

const quantities: readonly QuantityKey[] = ['nu0', 'Be', 'alphaE', 'D', 're', 'k'];
const headers: Readonly<Partial<Record<QuantityKey, string>>> = { alphaE: 'alpha_e' };
const units: ReportUnits = { length: 'pm', forceConstant: 'N/m' };

function gasesOf(file: string, random: Random): { gases: GasOptions[]; range: readonly [number, number] } {
  const gas = (name: 'HCl' | 'DCl'): GasOptions => ({
    gas: name,
    peakAbsorbance: 3 * 3 ** random.uniform(),
    deviation: 1e-5,
  });
  if (file.startsWith('hcl')) return { gases: [gas('HCl')], range: [2620, 3110] };
  if (file.startsWith('dcl')) return { gases: [gas('DCl')], range: [1900, 2250] };
  return { gases: [gas('HCl'), gas('DCl')], range: [1700, 3300] };
}

/** The spectrum of one file: an ordinary instrument, with its small faults. */
function spectrumOf(file: string, seed: number): SimulatedSpectrum {
  const random = createRandom(seed, 51);
  const { gases, range } = gasesOf(file, random);
  const shift = random.uniform();
  return simulateSpectrum({
    seed,
    gases,
    fromPerCm: range[0] + shift,
    toPerCm: range[1] + shift,
    lorentzHalfWidthPerCm: random.between(0.03, 0.08),
    resolutionPerCm: random.pick([0.5, 0.5, 1]),
    apodisation: random.pick(['raised-cosine', 'triangular', 'three-term-cosine']),
    zeroFilling: random.pick([2, 4]),
    noise: random.between(4e-4, 1.5e-3),
    noiseModel: 'interferogram',
    scaleErrorPpm: random.between(-60, 60),
    baselineOffset: random.between(0, 0.12),
    baselineSlope: random.between(-0.03, 0.03),
    baselineCurvature: random.between(-0.02, 0.02),
    foreign: { water: random.between(-0.06, 0.06) },
    ...(random.uniform() < 0.3
      ? { fringes: { amplitude: 0.003, periodPerCm: random.between(15, 40), phaseRad: random.uniform() } }
      : {}),
  });
}

function workOf(plan: PlannedSubmission, spectrum: SimulatedSpectrum, seed: number): StudentWork {
  const random = createRandom(seed, 52);
  const course: Course = {
    gas: plan.isotopologue === 'H35Cl' ? 'HCl' : 'DCl',
    isotopologue: plan.isotopologue,
    method: 'cubic',
    forceConstantFrom: 'nu0',
    anharmonicityPerCm: null,
    quantities,
  };
  return studentWork({
    seed,
    course,
    spectrum,
    habits: {
      read: 'parabola',
      readingErrorPerCm: random.between(0.005, 0.03),
      largestM: 8 + random.below(4),
    },
    units,
    slips: plan.slips,
  });
}

const cell = (text: string): string => (/[",\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text);
const csv = (rows: readonly (readonly string[])[]): Uint8Array =>
  new TextEncoder().encode(rows.map((row) => row.map(cell).join(',')).join('\n') + '\n');

function submissionsTable(done: readonly Done[]): Uint8Array {
  const head = [
    'student_id',
    'name',
    'group',
    'attempt',
    'received',
    'isotopologue',
    'spectrum',
    ...quantities.map((key) => `${headers[key] ?? key} (${columnUnit(key, units)})`),
  ];
  return csv([
    head,
    ...done.map(({ plan, work, fileName }, index) => [
      plan.student,
      `Invented Student ${index + 1}`,
      plan.group ?? '',
      '1',
      `2026-03-${String(12 + (index % 8)).padStart(2, '0')}T${String(9 + (index % 7)).padStart(2, '0')}:00:00+01:00`,
      plan.isotopologue,
      fileName,
      ...quantities.map((key) => work.texts[key] ?? ''),
    ]),
  ]);
}

function linesTable(done: readonly Done[]): Uint8Array {
  return csv([
    ['student', 'isotopologue', 'm', 'wavenumber'],
    ...done
      .filter(({ plan }) => plan.givesLines)
      .flatMap(({ plan, work }) =>
        work.lines.map((line) => [
          plan.student,
          plan.isotopologue,
          String(line.m),
          line.wavenumberPerCm.toFixed(2),
        ]),
      ),
  ]);
}

function truthTable(truth: readonly ExampleTruth[]): Uint8Array {
  return csv([
    ['student', 'isotopologue', 'spectrum', 'slips', 'in words', 'true nu0 (cm-1)', 'true Be (cm-1)', 'true alpha_e (cm-1)'],
    ...truth.map((row) => [
      row.student,
      row.isotopologue,
      row.spectrum,
      row.slips.join(' '),
      row.slips.length === 0
        ? 'honest work'
        : row.slips.map((code) => (slipWords as Record<string, string>)[code] ?? code).join('; '),
      row.bandOriginPerCm.toFixed(4),
      row.rotationalConstantEquilibriumPerCm.toFixed(5),
      row.alphaEPerCm.toFixed(5),
    ]),
  ]); // prettier-ignore
}

interface Done {
  readonly plan: PlannedSubmission;
  readonly work: StudentWork;
  readonly fileName: string;
}

/**
 * An invented section of 24 submissions of HCl and DCl with spectra in eleven file styles, a marking scheme and the list
 * of what was put in. The same seed gives the same bytes.
 */
export function exampleSection(seed: number): ExampleSection {
  if (!Number.isInteger(seed)) throw new RangeError(`seed must be a whole number, got ${seed}`);
  const spectra = new Map<string, { spectrum: SimulatedSpectrum; file: ExampleFile }>();
  const truth: ExampleTruth[] = [];
  const done = sectionPlan().map((plan, index): Done => {
    const style = fileStyles[plan.style];
    const fileName = `${plan.file}.${style.extension}`;
    let made = spectra.get(plan.file);
    if (!made) {
      const spectrum = spectrumOf(plan.file, 1000 * seed + index);
      const bytes = writeSpectrum(
        {
          title: `invented spectrum ${plan.file}`,
          wavenumberPerCm: spectrum.wavenumberPerCm,
          transmittance: spectrum.transmittance,
          resolutionPerCm: spectrum.truth.options.resolutionPerCm ?? 0.5,
          clipAbsorbance: 4,
        },
        style,
      );
      made = { spectrum, file: { name: `spectra/${fileName}`, bytes } };
      spectra.set(plan.file, made);
    }
    const band = made.spectrum.truth.bands.find((each) => each.isotopologue === plan.isotopologue)!;
    truth.push({
      student: plan.student,
      isotopologue: plan.isotopologue,
      spectrum: fileName,
      slips: plan.slips,
      bandOriginPerCm: band.constants.bandOriginPerCm,
      rotationalConstantEquilibriumPerCm: band.rotationalConstantEquilibriumPerCm,
      alphaEPerCm: band.alphaEPerCm,
    });
    return { plan, work: workOf(plan, made.spectrum, 1000 * seed + 500 + index), fileName };
  });
  const scheme = new TextEncoder().encode(JSON.stringify(sectionScheme, null, 2) + '\n');
  return {
    files: [
      { name: 'submissions.csv', bytes: submissionsTable(done) },
      { name: 'lines.csv', bytes: linesTable(done) },
      { name: 'scheme.json', bytes: scheme },
      { name: 'what-was-put-in.csv', bytes: truthTable(truth) },
      ...[...spectra.values()].map(({ file }) => file),
    ],
    truth,
  };
}
