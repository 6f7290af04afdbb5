import type { Isotopologue } from '../../molecule/types.ts';
import type { Measured, QuantityKey, StandardUnit } from '../../units/types.ts';
import { propagate } from '../propagate.ts';
import type { Constants, MethodSettings, PrescribedMethod } from '../types.ts';
import { derive, readOf, type DeriveContext, type Values } from './derive.ts';
import { reducedMassU as reducedMassOf } from '../../molecule/isotopologue.ts';
import type { MethodLine, Primitives, PrimitiveKey } from './method-line.ts';
import { linesOfMethod, primitivesByMethod } from './primitives.ts';

/** What else than the lines of one band a method may need. */
export interface MethodExtra {
  /** Upper vibrational quantum number of the band of the lines; 1 where absent. */
  readonly upper?: number;
  /** Lines of the first overtone of the same isotopologue. */
  readonly overtone?: readonly MethodLine[];
  /** Fundamental of the isotopologue with the other hydrogen (H for D, D for H). */
  readonly partner?: { readonly isotopologue: Isotopologue; readonly lines: readonly MethodLine[] };
}

/** Standard unit of each quantity. */
export function unitOf(key: QuantityKey): StandardUnit {
  switch (key) {
    case 're':
    case 'r0':
      return 'pm';
    case 'k':
      return 'N/m';
    case 'I':
      return 'kg m2';
    case 'mu':
      return 'u';
    default:
      return 'cm-1';
  }
}

/** Primitives of the band and of what stands beside it, stacked into one vector so that uncertainties propagate together. */
export interface StackedPrimitives {
  readonly own: Primitives;
  readonly overtone: Primitives | null;
  readonly partner: Primitives | null;
  readonly values: readonly number[];
  /** Row-major, cm-2, from the lines' own uncertainties. */
  readonly covariance: () => Float64Array;
  /** The same for one unit of common line error (1 cm-1 on every line, independent): scale by a reading error squared. */
  readonly readingCovariance: () => Float64Array;
  readonly context: (values: readonly number[]) => DeriveContext;
}

/** The stacked primitives, or a sentence why the lines do not carry the method. */
export function stackPrimitives(
  lines: readonly MethodLine[],
  method: PrescribedMethod,
  settings: MethodSettings,
  isotopologue: Isotopologue,
  extra: MethodExtra = {},
): StackedPrimitives | { readonly reason: string } {
  const own = primitivesByMethod(lines, method);
  if (!own.ok) return { reason: own.reason };
  const overtone = extra.overtone === undefined ? null : partOf(extra.overtone, method);
  const partner = extra.partner === undefined ? null : partOf(extra.partner.lines, method);
  const parts = [
    { primitives: own.primitives, lines: linesOfMethod(lines, method) },
    ...(overtone === null
      ? []
      : [{ primitives: overtone, lines: linesOfMethod(extra.overtone ?? [], method) }]),
    ...(partner === null
      ? []
      : [{ primitives: partner, lines: linesOfMethod(extra.partner?.lines ?? [], method) }]),
  ];
  const values = parts.flatMap((p) => p.primitives.values);
  const reducedMassU = reducedMassOf(isotopologue, settings.masses);
  const partnerMassU =
    extra.partner === undefined ? 0 : reducedMassOf(extra.partner.isotopologue, settings.masses);
  const context = (v: readonly number[]): DeriveContext => {
    const ownRead = slice(own.primitives, v, 0);
    const overtoneAt = own.primitives.keys.length;
    const partnerAt = overtoneAt + (overtone?.keys.length ?? 0);
    const partnerRead = partner === null ? null : slice(partner, v, partnerAt);
    return {
      settings,
      reducedMassU,
      upper: extra.upper ?? 1,
      read: ownRead,
      overtone: overtone === null ? null : slice(overtone, v, overtoneAt),
      partner: partnerRead?.nu0 === undefined ? null : { nu0: partnerRead.nu0, reducedMassU: partnerMassU },
    };
  };
  return {
    own: own.primitives,
    overtone,
    partner,
    values,
    covariance: () => blockCovariance(parts, (line) => line.uncertaintyPerCm ** 2),
    readingCovariance: () => blockDiagonal(parts.map((p) => p.primitives)),
    context,
  };
}

/**
 * Constants by a prescribed method from lines, as correct student work would get them, with uncertainties carried from the lines.
 *
 * @param lines lines of one band of one isotopologue, cm-1, any order. @param extra overtone or partner lines for ωexe.
 * @returns every quantity that method and settings yield, in standard units; empty where the lines do not carry the method.
 */
export function constantsByMethod(
  lines: readonly MethodLine[],
  method: PrescribedMethod,
  settings: MethodSettings,
  isotopologue: Isotopologue,
  extra: MethodExtra = {},
): Constants {
  const stacked = stackPrimitives(lines, method, settings, isotopologue, extra);
  if ('reason' in stacked) return {};
  const values = derive(stacked.context(stacked.values));
  const constants: Partial<Record<QuantityKey, Measured>> = {};
  const covariance = stacked.covariance();
  for (const key of Object.keys(values) as QuantityKey[]) {
    const { value, uncertainty } = propagate(
      stacked.values,
      covariance,
      (v) => derive(stacked.context(v))[key] ?? NaN,
    );
    const exact = key === 'mu' || (key === 'omegaExe' && settings.anharmonicityFrom === 'given');
    constants[key] = { value, uncertainty: exact ? null : uncertainty, unit: unitOf(key) };
  }
  return constants;
}

/** Values alone, without uncertainties: quick enough for hundreds of line sets. */
export function valuesByMethod(
  lines: readonly MethodLine[],
  method: PrescribedMethod,
  settings: MethodSettings,
  isotopologue: Isotopologue,
  extra: MethodExtra = {},
): Values {
  const own = primitivesByMethod(lines, method);
  if (!own.ok) return {};
  const overtone = extra.overtone === undefined ? null : partOf(extra.overtone, method);
  const partner = extra.partner === undefined ? null : partOf(extra.partner.lines, method);
  const partnerNu0 = partner === null ? undefined : readOf(partner).nu0;
  return derive({
    settings,
    reducedMassU: reducedMassOf(isotopologue, settings.masses),
    upper: extra.upper ?? 1,
    read: readOf(own.primitives),
    overtone: overtone === null ? null : readOf(overtone),
    partner:
      partnerNu0 === undefined || extra.partner === undefined
        ? null
        : { nu0: partnerNu0, reducedMassU: reducedMassOf(extra.partner.isotopologue, settings.masses) },
  });
}

function partOf(lines: readonly MethodLine[], method: PrescribedMethod): Primitives | null {
  const result = primitivesByMethod(lines, method);
  return result.ok ? result.primitives : null;
}

/** Built without intermediate arrays: it runs thousands of times when slips are weighed. */
function slice(
  primitives: Primitives,
  values: readonly number[],
  from: number,
): Partial<Record<PrimitiveKey, number>> {
  const read: Partial<Record<PrimitiveKey, number>> = {};
  for (let i = 0; i < primitives.keys.length; i++) read[primitives.keys[i]!] = values[from + i]!;
  return read;
}

function blockCovariance(
  parts: readonly { primitives: Primitives; lines: readonly MethodLine[] }[],
  variance: (line: MethodLine) => number,
): Float64Array {
  const n = parts.reduce((sum, p) => sum + p.primitives.keys.length, 0);
  const covariance = new Float64Array(n * n);
  let offset = 0;
  for (const { primitives, lines } of parts) {
    const variances = lines.map(variance);
    const { weights } = primitives;
    for (let i = 0; i < weights.length; i++) {
      for (let j = 0; j <= i; j++) {
        const [a, b] = [weights[i]!, weights[j]!];
        let sum = 0;
        for (let l = 0; l < variances.length; l++) sum += a[l]! * b[l]! * variances[l]!;
        covariance[(offset + i) * n + offset + j] = sum;
        covariance[(offset + j) * n + offset + i] = sum;
      }
    }
    offset += weights.length;
  }
  return covariance;
}

function blockDiagonal(blocks: readonly Primitives[]): Float64Array {
  if (blocks.length === 1) return blocks[0]!.readingCovariance;
  const n = blocks.reduce((sum, b) => sum + b.keys.length, 0);
  const whole = new Float64Array(n * n);
  let offset = 0;
  for (const { keys, readingCovariance } of blocks) {
    for (let i = 0; i < keys.length; i++) {
      for (let j = 0; j < keys.length; j++) {
        whole[(offset + i) * n + offset + j] = readingCovariance[i * keys.length + j]!;
      }
    }
    offset += keys.length;
  }
  return whole;
}
