import type { AssignedBand, AssignedLine } from '../assignment/types.ts';
import type { PreparedSpectrum } from '../spectrum/types.ts';
import type { Reason } from '../units/types.ts';
import { lineId } from './correct.ts';
import type { Doubt } from './doubts.ts';
import type { FittedBand } from './fitted-band.ts';
import { forwardBands } from './forward-bands.ts';
import { fitWholeSpectrum } from './forward/fit-whole-spectrum.ts';
import type { ForwardBand, ForwardFit, ForwardLine } from './forward/types.ts';

/** Bands of one region after the fit. */
export interface RegionOutcome {
  readonly bands: readonly FittedBand[];
  readonly lines: readonly AssignedLine[];
  readonly bandDoubts: readonly {
    readonly isotopologue: string;
    readonly band: string;
    readonly doubt: Doubt;
  }[];
  readonly notes: readonly Reason[];
  readonly model: string;
}

/** A line that stands this many σ (and this share of a width) off its band is named and left out. */
const outlierSigmas = 5;
const outlierWidths = 0.08;
/** Rounds in which outliers are taken out: more would eat a band that does not fit. */
const outlierRounds = 2;

/** Fits the bands of one region to the points, naming outliers, and gives every line its own position and residual. */
export function fitRegionOfBands(
  prepared: PreparedSpectrum,
  bands: readonly AssignedBand[],
  lines: readonly AssignedLine[],
): RegionOutcome {
  const width = prepared.resolutionPerCm ?? 4 * prepared.stepPerCm;
  let problem = forwardBands(prepared, bands, lines);
  if (problem.length === 0) return failed(bands, lines, 'too few lines for a fit of the spectrum');
  let fit = fitWholeSpectrum({ prepared, bands: problem });
  if (fit.outcome !== 'converged') return failed(bands, lines, fit.reason);
  const outliers = new Map<number, string>();
  for (let round = 0; round < outlierRounds; round++) {
    const fresh = outlierIndices(fit, problem, lines, width).filter((i) => !outliers.has(i));
    if (fresh.length === 0) break;
    for (const i of fresh) outliers.set(i, 'stands off the band: another gas, a spike or a blend');
    problem = freed(problem, fit.lines, new Set(outliers.keys()));
    const again = fitWholeSpectrum({ prepared, bands: problem });
    if (again.outcome !== 'converged') break;
    fit = again;
  }
  return described(prepared, problem, fit, lines, outliers, width);
}

/** Lines far off their band, by index; at most a fifth of a band, accepted ones never. */
function outlierIndices(
  fit: ForwardFit,
  bands: readonly ForwardBand[],
  lines: readonly AssignedLine[],
  width: number,
): number[] {
  return bands.flatMap((band, bandIndex) => {
    if (band.follows !== undefined) return [];
    const own = fit.lines
      .map((l, i) => ({ l, i }))
      .filter(({ l }) => l.bandIndex === bandIndex && !band.freeMs?.includes(l.m));
    const off = own.filter(
      ({ l }) =>
        Math.abs(l.residualPerCm) > outlierSigmas * l.uncertaintyPerCm &&
        Math.abs(l.residualPerCm) > outlierWidths * width &&
        !isAccepted(lines, band, l.m),
    );
    return off.length > 0.2 * own.length + 1 ? [] : off.map(({ i }) => i);
  });
}

const isAccepted = (lines: readonly AssignedLine[], band: ForwardBand, m: number): boolean =>
  lines.some(
    (l) =>
      l.isotopologue === band.isotopologue.name && l.band === band.band && l.m === m && l.accepted === true,
  );

function freed(
  bands: readonly ForwardBand[],
  lines: readonly ForwardLine[],
  indices: ReadonlySet<number>,
): ForwardBand[] {
  return bands.map((band, bandIndex) => {
    const ms = lines.flatMap((l, i) => (l.bandIndex === bandIndex && indices.has(i) ? [l.m] : []));
    return ms.length === 0 ? band : { ...band, freeMs: [...new Set([...(band.freeMs ?? []), ...ms])] };
  });
}

function described(
  prepared: PreparedSpectrum,
  bands: readonly ForwardBand[],
  fit: ForwardFit,
  assigned: readonly AssignedLine[],
  outliers: ReadonlyMap<number, string>,
  width: number,
): RegionOutcome {
  const total = 5 * bands.length;
  const fitted = bands.map((band, i): FittedBand => {
    const covariance = new Float64Array(25);
    for (let a = 0; a < 5; a++) {
      for (let b = 0; b < 5; b++) covariance[a * 5 + b] = fit.covariance[(5 * i + a) * total + 5 * i + b]!;
    }
    return {
      isotopologue: band.isotopologue,
      band: band.band,
      upper: Number(band.band.split('-')[0]),
      constants: fit.constants[i]!,
      covariance,
      merged: band.follows !== undefined,
    };
  });
  const lines = fit.lines.flatMap((l, i) =>
    assignedLine(prepared, bands[l.bandIndex]!, l, assigned, outliers.get(i) ?? null),
  );
  const notes: Reason[] = [];
  if (outliers.size > 0) {
    const names = [...outliers.keys()].map((i) => lineName(bands, fit.lines[i]!));
    notes.push({
      code: 'line-foreign',
      text: `Left out of the fit: ${names.join(', ')} (off the band by more than ${outlierSigmas} σ: another gas, a spike or a blend).`,
    });
  }
  if (fit.leftOutPerCm.length > 0) {
    notes.push({
      code: 'foreign-absorption',
      text: `Something else absorbs in ${fit.leftOutPerCm.length} places between the lines; these points have no weight.`,
    });
  }
  if (bands.some((b) => b.follows !== undefined)) {
    const names = bands.filter((b) => b.follows !== undefined).map((b) => b.isotopologue.name);
    notes.push({
      code: 'merged-doublet',
      text: `The lines of ${names.join(', ')} run into those of the main isotopologue at ${width.toPrecision(2)} cm⁻¹; natural abundance and mass scaling are assumed for them.`,
    });
  }
  return { bands: fitted, lines, bandDoubts: [], notes, model: modelText(bands, fit) };
}

const lineName = (bands: readonly ForwardBand[], l: ForwardLine): string =>
  `${bands[l.bandIndex]!.isotopologue.name} ${l.m > 0 ? `R(${l.m - 1})` : `P(${-l.m})`}`;

/** Lines that stand above the noise, as the reference shows them; a merged partner has none of its own. */
function assignedLine(
  prepared: PreparedSpectrum,
  band: ForwardBand,
  l: ForwardLine,
  assigned: readonly AssignedLine[],
  leftOutBecause: string | null,
): AssignedLine[] {
  if (band.follows !== undefined) return [];
  const before = assigned.find(
    (a) => a.isotopologue === band.isotopologue.name && a.band === band.band && a.m === l.m,
  );
  const width = prepared.resolutionPerCm ?? 4 * prepared.stepPerCm;
  if (before === undefined && l.uncertaintyPerCm > 0.15 * width) return [];
  const branch = l.m > 0 ? 'R' : 'P';
  const why = before?.leftOutBecause ?? leftOutBecause;
  return [
    {
      id: lineId(band.isotopologue.name, band.band, l.m),
      isotopologue: band.isotopologue.name,
      band: band.band,
      branch,
      jLower: l.m > 0 ? l.m - 1 : -l.m,
      m: l.m,
      wavenumberPerCm: l.wavenumberPerCm,
      uncertaintyPerCm: l.uncertaintyPerCm,
      peakAbsorbance: before?.peakAbsorbance ?? -Math.log10(Math.max(1e-6, 1 - l.depth)),
      saturated: before?.saturated ?? l.trueAbsorbance > 2,
      blended: l.blended,
      used: why === null,
      leftOutBecause: why,
      residualPerCm: l.residualPerCm,
    },
  ];
}

function modelText(bands: readonly ForwardBand[], fit: ForwardFit): string {
  const names = bands.map((b) => `${b.isotopologue.name} ${b.band}`).join(', ');
  const distortion = { free: 'D free in both states', tied: 'D tied (D_n = D_0)', held: 'D held' }[
    bands[0]!.distortion
  ];
  const { instrument } = fit;
  return (
    `${names}: whole spectrum, ${distortion}, H held by its relation to D, B and ωe, ${fit.lines.length} lines; ` +
    `instrument with a path difference of ${instrument.maximumPathDifferenceCm.toPrecision(3)} cm; ` +
    `σ from the residuals${fit.misfit > 1.05 ? `, enlarged ${fit.misfit.toPrecision(2)} times on the lines` : ''}.`
  );
}

function failed(
  bands: readonly AssignedBand[],
  lines: readonly AssignedLine[],
  reason: string,
): RegionOutcome {
  const names = bands.map((b) => `${b.isotopologue.name} ${b.band}`).join(', ');
  return {
    bands: [],
    lines: lines.filter((l) =>
      bands.some((b) => b.isotopologue.name === l.isotopologue && b.band === l.band),
    ),
    bandDoubts: bands.map((b) => ({
      isotopologue: b.isotopologue.name,
      band: b.band,
      doubt: { code: 'no-fit', text: `${names} was found, but not fitted: ${reason}.`, takesDownTo: 'none' },
    })),
    notes: [],
    model: '',
  };
}
