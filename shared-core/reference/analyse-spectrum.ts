import { assignLines } from '../assignment/assign-lines.ts';
import type { AssignedBand, AssignedLine, RunnerUp } from '../assignment/types.ts';
import { findLines } from '../lines/find-lines.ts';
import { lineWavenumberPerCm, naturalAbundance } from '../molecule/index.ts';
import { prepareSpectrum } from '../spectrum/prepare/prepare-spectrum.ts';
import type { OrdinateKind, PreparedSpectrum, Spectrum } from '../spectrum/types.ts';
import type { Reason } from '../units/types.ts';
import { correctLines } from './correct.ts';
import type { Doubt } from './doubts.ts';
import type { FittedBand } from './fitted-band.ts';
import { fitRegionOfBands, type RegionOutcome } from './fit-bands.ts';
import type { Correction } from './types.ts';

/** What one spectrum shows, before the settings of a scheme are applied. */
export interface SpectrumAnalysis {
  readonly fileName: string;
  readonly ordinate: OrdinateKind;
  readonly ordinateReason: string;
  readonly bands: readonly FittedBand[];
  readonly lines: readonly AssignedLine[];
  readonly runnerUp: RunnerUp | null;
  /** What speaks against everything that the file shows. */
  readonly doubts: readonly Doubt[];
  /** What speaks against one isotopologue's band. */
  readonly bandDoubts: readonly {
    readonly isotopologue: string;
    readonly band: string;
    readonly doubt: Doubt;
  }[];
  readonly notes: readonly Reason[];
  readonly model: string;
}

export interface AnalyseOptions {
  readonly candidates?: readonly string[];
  readonly corrections?: readonly Correction[];
}

/**
 * Everything from the points of one spectrum to fitted bands: preparation, lines, blind assignment, whole-spectrum fit.
 *
 * @param spectrum as read. @param options isotopologues that may be there, and an instructor's corrections.
 */
export function analyseSpectrum(spectrum: Spectrum, options: AnalyseOptions = {}): SpectrumAnalysis {
  const corrections = options.corrections ?? [];
  const prepared = prepare(spectrum, corrections);
  if ('unusable' in prepared) {
    return nothing(spectrum, [{ ...prepared.unusable, takesDownTo: 'none' }], []);
  }
  const notes = [...spectrum.notes, ...prepared.notes];
  const names = corrections.findLast((c) => c.kind === 'isotopologues')?.names ?? options.candidates;
  const found = findLines(prepared);
  const assignment = assignLines(found, {
    ...(names === undefined ? {} : { candidates: names }),
    ...(prepared.resolutionPerCm === null ? {} : { widthPerCm: prepared.resolutionPerCm }),
  });
  if ('code' in assignment) {
    return nothing(
      spectrum,
      [{ code: assignment.code, text: assignment.reason, takesDownTo: 'none' }],
      notes,
    );
  }
  const lines = correctLines(
    assignment.bands.flatMap((b) => [...b.lines]),
    corrections,
  );
  const bands = assignment.bands.map((b) => renumbered(b, corrections));
  const regions = regionsOf(prepared, bands).map((group) => fitRegionOfBands(prepared, group, lines));
  return gathered(spectrum, prepared, regions, assignment.runnerUp, notes);
}

function prepare(spectrum: Spectrum, corrections: readonly Correction[]): ReturnType<typeof prepareSpectrum> {
  const ordinate = corrections.findLast((c) => c.kind === 'ordinate')?.ordinate;
  const range = corrections.findLast((c) => c.kind === 'range');
  return prepareSpectrum(spectrum, {
    ...(ordinate === undefined ? {} : { ordinateKind: ordinate }),
    ...(range === undefined ? {} : { fromPerCm: range.fromPerCm, toPerCm: range.toPerCm }),
  });
}

/** Constants that a moved numbering starts from: the same wavenumbers, read with m + s. */
function renumbered(band: AssignedBand, corrections: readonly Correction[]): AssignedBand {
  const shift = corrections
    .filter(
      (c) => c.kind === 'index-shift' && c.isotopologue === band.isotopologue.name && c.band === band.band,
    )
    .reduce((sum, c) => sum + (c.kind === 'index-shift' ? c.shift : 0), 0);
  if (shift === 0) return band;
  const c = band.constants;
  const c1 = c.rotationalConstantLowerPerCm + c.rotationalConstantUpperPerCm;
  const c2 = c.rotationalConstantUpperPerCm - c.rotationalConstantLowerPerCm;
  return {
    ...band,
    constants: {
      ...c,
      bandOriginPerCm: c.bandOriginPerCm - shift * c1 + shift * shift * c2,
      rotationalConstantLowerPerCm: c.rotationalConstantLowerPerCm - shift * c2,
      rotationalConstantUpperPerCm: c.rotationalConstantUpperPerCm - shift * c2,
    },
  };
}

/** Bands whose lines interleave are fitted together; one band alone makes a region of its own. */
function regionsOf(prepared: PreparedSpectrum, bands: readonly AssignedBand[]): AssignedBand[][] {
  const width = prepared.resolutionPerCm ?? 4 * prepared.stepPerCm;
  const spans = bands.map((band) => {
    const ms = band.lines.length > 0 ? band.lines.map((l) => l.m) : [-1, 1];
    const positions = ms.map((m) => lineWavenumberPerCm(band.constants, m));
    return { band, from: Math.min(...positions) - 4 * width, to: Math.max(...positions) + 4 * width };
  });
  spans.sort((a, b) => a.from - b.from);
  const regions: { bands: AssignedBand[]; to: number }[] = [];
  for (const span of spans) {
    const last = regions.at(-1);
    if (last !== undefined && span.from < last.to) {
      last.bands.push(span.band);
      last.to = Math.max(last.to, span.to);
    } else regions.push({ bands: [span.band], to: span.to });
  }
  // Within a region the leader of a merged pair stands first, then the more abundant isotopologue.
  const abundance = (b: AssignedBand): number => naturalAbundance(b.isotopologue);
  return regions.map((r) =>
    r.bands.sort((a, b) => Number(a.merged) - Number(b.merged) || abundance(b) - abundance(a)),
  );
}

function gathered(
  spectrum: Spectrum,
  prepared: PreparedSpectrum,
  regions: readonly RegionOutcome[],
  runnerUp: RunnerUp | null,
  notes: readonly Reason[],
): SpectrumAnalysis {
  const doubts: Doubt[] = [];
  if (prepared.inverted) {
    doubts.push({
      code: 'lines-inverted',
      takesDownTo: 'check',
      text: 'The lines point the other way; the spectrum was turned over.',
    });
  }
  return {
    fileName: spectrum.fileName,
    ordinate: prepared.spectrum.ordinateKind,
    ordinateReason: spectrum.ordinateReason,
    bands: regions.flatMap((r) => r.bands),
    lines: regions.flatMap((r) => r.lines),
    runnerUp,
    doubts,
    bandDoubts: regions.flatMap((r) => r.bandDoubts),
    notes: [...notes, ...regions.flatMap((r) => r.notes)],
    model: regions.map((r) => r.model).join(' '),
  };
}

function nothing(spectrum: Spectrum, doubts: readonly Doubt[], notes: readonly Reason[]): SpectrumAnalysis {
  return {
    fileName: spectrum.fileName,
    ordinate: spectrum.ordinateKind,
    ordinateReason: spectrum.ordinateReason,
    bands: [],
    lines: [],
    runnerUp: null,
    doubts,
    bandDoubts: [],
    notes,
    model: '',
  };
}
