import { publishedConstants } from '../molecule/index.ts';
import type { Reason } from '../units/types.ts';
import { coreVersion } from '../version.ts';
import type { SpectrumAnalysis } from './analyse-spectrum.ts';
import {
  axisScalePpm,
  kratzerCheck,
  lineChecks,
  pairChecks,
  plausibilityChecks,
  precisionChecks,
  pullCheck,
  runnerUpCheck,
} from './checks.ts';
import { deriveConstants } from './derive-constants.ts';
import { reasonsOf, reliabilityAfter, type Doubt } from './doubts.ts';
import type { FittedBand } from './fitted-band.ts';
import type { Constants, FileReference, MethodSettings, ReferenceCheck, Reliability } from './types.ts';

/** One isotopologue of a reference by itself. */
interface Part {
  readonly name: string;
  readonly constants: Constants;
  readonly doubts: readonly Doubt[];
  readonly checks: readonly ReferenceCheck[];
}

const failed = (checks: readonly ReferenceCheck[]): Doubt[] =>
  checks.filter((c) => !c.passed).map((c) => ({ code: c.code, text: c.text, takesDownTo: 'check' }));

/**
 * The reference that the analyses of one submission's files make together (an H/D pair or an overtone may come as two files).
 *
 * @param analyses one per spectrum, in the order of the files. @param settings the part of the scheme that turns bands into constants.
 * @param preferred isotopologues asked for, in order: the first one present becomes the main one.
 */
export function combineAnalyses(
  analyses: readonly SpectrumAnalysis[],
  settings: MethodSettings,
  preferred: readonly string[],
): FileReference {
  const first = analyses[0];
  if (first === undefined) throw new RangeError('analyses: expected at least one');
  const bands = distinctBands(analyses);
  const names = [...new Set(bands.map((b) => b.isotopologue.name))];
  const lines = analyses.flatMap((a) => a.lines);
  // A file without any band does not spoil the others of the submission; alone, it says why there is nothing.
  const common = analyses.flatMap((a) =>
    names.length === 0
      ? [...a.doubts, ...a.bandDoubts.map((d) => d.doubt)]
      : a.doubts.filter((d) => d.takesDownTo !== 'none'),
  );
  const notes = analyses.flatMap((a) => a.notes);
  if (names.length === 0) return withoutBand(first, common, notes);
  const pairFailures = pairChecks(bands);
  const parts = names.map((name) => part(name, bands, analyses, settings));
  const main = parts.find((p) => p.name === (preferred.find((n) => names.includes(n)) ?? names[0]))!;
  const doubts = [
    ...common,
    ...main.doubts,
    ...failed(pairFailures).filter((d) => d.text.includes(main.name)),
  ];
  const partReliability = (p: Part): Reliability =>
    reliabilityAfter([
      ...common,
      ...p.doubts,
      ...failed(pairFailures).filter((d) => d.text.includes(p.name)),
    ]);
  const scales = bands.filter((b) => b.isotopologue.name === main.name).map(axisScalePpm);
  return {
    reliability: reliabilityAfter(doubts),
    reasons: reasonsOf(doubts),
    checks: [...main.checks, ...pairFailures],
    axisScalePpm: scales[0] ?? null,
    ordinate: first.ordinate,
    ordinateReason: first.ordinateReason,
    isotopologue: main.name,
    best: main.constants,
    isotopologues: Object.fromEntries(parts.map((p) => [p.name, p.constants])),
    isotopologueReliability: Object.fromEntries(parts.map((p) => [p.name, partReliability(p)])),
    isotopologueReasons: Object.fromEntries(parts.map((p) => [p.name, reasonsOf([...common, ...p.doubts])])),
    isotopologueChecks: Object.fromEntries(parts.map((p) => [p.name, p.checks])),
    runnerUp: analyses.map((a) => a.runnerUp).find((r) => r !== null) ?? null,
    lines,
    model: analyses
      .map((a) => a.model)
      .filter((m) => m !== '')
      .join(' '),
    notes,
    coreVersion,
  };
}

/** Each band once: where two files show the same band, the more precise one counts. */
function distinctBands(analyses: readonly SpectrumAnalysis[]): FittedBand[] {
  const best = new Map<string, FittedBand>();
  for (const band of analyses.flatMap((a) => a.bands)) {
    const key = `${band.isotopologue.name}/${band.band}`;
    const other = best.get(key);
    if (other === undefined || band.covariance[6]! < other.covariance[6]!) best.set(key, band);
  }
  return [...best.values()];
}

function part(
  name: string,
  bands: readonly FittedBand[],
  analyses: readonly SpectrumAnalysis[],
  settings: MethodSettings,
): Part {
  const own = bands.filter((b) => b.isotopologue.name === name);
  const pairs = bands.filter((b) => b.isotopologue.name !== name && samePair(own[0]!, b));
  const { constants } = deriveConstants(own, pairs, settings);
  const main = own.find((b) => b.upper === 1) ?? own[0]!;
  const analysis = analyses.find((a) => a.bands.includes(main))!;
  const checks = [
    ...precisionChecks(main),
    ...lineChecks(main, analysis.lines),
    ...pullCheck(main, analysis.lines),
    ...plausibilityChecks(main),
    ...kratzerCheck(main),
    ...runnerUpCheck(analysis.runnerUp),
  ];
  const doubts = failed(checks);
  if (main.upper !== 1) {
    doubts.push({
      code: 'overtone-alone',
      takesDownTo: 'check',
      text: `${name}: only the overtone ${main.band} is there; it fixes no k, no ωe and no Be.`,
    });
  }
  if (publishedConstants(name)?.openShell === true) {
    doubts.push({
      code: 'open-shell',
      takesDownTo: 'check',
      text: `${name} is no ¹Σ molecule: its lines are split, and this model only averages them.`,
    });
  }
  return { name, constants, doubts, checks };
}

const elementsOf = (band: FittedBand): string =>
  band.isotopologue.nuclides.map((n) => (n.element === 'D' ? 'H' : n.element)).join();
const samePair = (a: FittedBand, b: FittedBand): boolean => elementsOf(a) === elementsOf(b);

function withoutBand(
  first: SpectrumAnalysis,
  doubts: readonly Doubt[],
  notes: readonly Reason[],
): FileReference {
  return {
    reliability: 'none',
    reasons: reasonsOf(doubts),
    checks: [],
    axisScalePpm: null,
    ordinate: first.ordinate,
    ordinateReason: first.ordinateReason,
    isotopologue: null,
    best: {},
    isotopologues: {},
    isotopologueReliability: {},
    isotopologueReasons: {},
    isotopologueChecks: {},
    runnerUp: null,
    lines: [],
    model: '',
    notes,
    coreVersion,
  };
}
