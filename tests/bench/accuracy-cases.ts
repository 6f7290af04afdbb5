import { simulateSpectrum } from '../../electron/backend/example/simulate.ts';
import { makeReference } from '../../shared-core/reference/make-reference.ts';
import { accuracyCases } from './accuracy-options.ts';
import { cramerRaoBounds } from './bound.ts';
import { benchSettings, errorsOf, fileOf, isWrong } from './judge.ts';

export interface AccuracyTask {
  readonly caseIndex: number;
  readonly seed: number;
}

/** Errors over bounds and over stated uncertainties of one spectrum; ratios null where no constants came out. */
export interface AccuracyRecord {
  readonly reliability: string;
  readonly codes: string;
  readonly ratios: readonly number[] | null;
  readonly pulls: readonly number[];
  readonly wrong: boolean;
  readonly milliseconds: number;
}

export function measureAccuracy({ caseIndex, seed }: AccuracyTask): AccuracyRecord {
  const spectrum = simulateSpectrum(accuracyCases[caseIndex]!.options(seed));
  const truth = spectrum.truth.bands[0]!;
  const bound = cramerRaoBounds(spectrum).get(`${truth.isotopologue}/1-0`)!;
  const file = fileOf(spectrum);
  const started = performance.now();
  const reference = makeReference({ files: [file], settings: benchSettings });
  const milliseconds = performance.now() - started;
  const constants = reference.isotopologues[truth.isotopologue];
  const errors = constants ? errorsOf(constants, truth) : null;
  const codes = reference.reasons.map((reason) => reason.code).join(' ');
  const about = { reliability: reference.reliability, codes, milliseconds };
  if (!constants || !errors) return { ...about, ratios: null, pulls: [], wrong: false };
  const keys = ['bandOriginPerCm', 'rotationalConstantEquilibriumPerCm', 'alphaEPerCm'] as const;
  const stated = [constants.nu0, constants.Be, constants.alphaE];
  return {
    ...about,
    ratios: keys.map((key) => errors[key] / bound[key]),
    pulls: keys.flatMap((key, i) => {
      const uncertainty = stated[i]?.uncertainty;
      return uncertainty ? [Math.abs(errors[key]) / uncertainty] : [];
    }),
    wrong: isWrong(errors, truth),
  };
}
