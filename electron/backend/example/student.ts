import type { QuantityKey } from '../../../shared-core/units/types.ts';
import { absorbanceOf } from './artefacts.ts';
import { createRandom } from './random.ts';
import type { SimulatedSpectrum } from './simulate.ts';
import {
  analyse,
  slippedLines,
  type Course,
  type StudentLines,
  type StudentValues,
} from './student-analysis.ts';
import { readLines, type ReadLine, type ReadingHabits } from './student-reading.ts';
import { writeDown, type ReportUnits } from './student-report.ts';
import type { SlipCode } from './student-slips.ts';

export interface StudentOptions {
  readonly seed: number;
  /** Seed of the way in which slips play out; `seed` where absent. */
  readonly slipSeed?: number;
  readonly course: Course;
  readonly spectrum: SimulatedSpectrum;
  readonly habits: ReadingHabits;
  readonly units: ReportUnits;
  readonly slips: readonly SlipCode[];
}

/** What an invented student hands in, and what they would have handed in without the slips. */
export interface StudentWork {
  /** Lines as numbered by the student. */
  readonly lines: readonly ReadLine[];
  readonly texts: Partial<Record<QuantityKey, string>>;
  /** Standard units, unrounded, slips of analysis included, slips of writing not. */
  readonly values: StudentValues;
  /** The same method on the same readings without any slip. */
  readonly unslipped: StudentValues;
  /** Cells of the unslipped work, rounded alike. */
  readonly unslippedTexts: Partial<Record<QuantityKey, string>>;
}

/** Reads lines off the file, fits by the course's method, derives, rounds, and slips where told to. */
export function studentWork(options: StudentOptions): StudentWork {
  const { course, spectrum, seed } = options;
  const slips = new Set(options.slips);
  const absorbance = absorbanceOf(spectrum.transmittance);
  const read = (isotopologue: string | undefined): readonly ReadLine[] => {
    const band = spectrum.truth.bands.find(
      (each) => each.isotopologue === isotopologue && each.band === '1-0',
    );
    if (!band) return [];
    return readLines(spectrum.wavenumberPerCm, absorbance, band, options.habits, createRandom(seed, 41));
  };
  const partner = spectrum.truth.bands.find(
    (band) => band.gas === course.gas && band.isotopologue !== course.isotopologue,
  );
  const lines: StudentLines = { asked: read(course.isotopologue), heavy: read(partner?.isotopologue) };
  const slipSeed = options.slipSeed ?? seed;
  const values = analyse(lines, course, slips, createRandom(slipSeed, 42));
  const unslipped = analyse(lines, course, new Set(), createRandom(seed, 42));
  const write = (of: StudentValues, which: ReadonlySet<SlipCode>): StudentWork['texts'] =>
    writeDown(of, course, options.units, which, createRandom(slipSeed, 43));
  return {
    lines: slippedLines(lines, (code) => slips.has(code), createRandom(slipSeed, 42)),
    texts: write(values, slips),
    values,
    unslipped,
    unslippedTexts: write(unslipped, new Set()),
  };
}
