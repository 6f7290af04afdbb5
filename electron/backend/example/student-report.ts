import type { QuantityKey } from '../../../shared-core/units/types.ts';
import type { Random } from './random.ts';
import type { Course, StudentValues } from './student-analysis.ts';
import type { SlipCode } from './student-slips.ts';

/** Units in which a course's columns ask for lengths and force constants. */
export interface ReportUnits {
  readonly length: 'pm' | 'Å' | 'nm';
  readonly forceConstant: 'N/m' | 'mdyn/Å';
}

const lengthFactor = { pm: 1, Å: 0.01, nm: 0.001 } as const;
const forceFactor = { 'N/m': 1, 'mdyn/Å': 0.01 } as const;

/** Unit of the column of a quantity. */
export function columnUnit(key: QuantityKey, units: ReportUnits): string {
  if (key === 're' || key === 'r0') return units.length;
  return key === 'k' ? units.forceConstant : 'cm-1';
}

/** Constants as a handbook prints them, for those who copy: H35Cl and D35Cl, Huber and Herzberg (1979), to all digits. */
const handbook: Readonly<Record<string, StudentValues>> = {
  H35Cl: { Be: 10.593416, alphaE: 0.307181, re: 127.455 },
  D35Cl: { Be: 5.448794, alphaE: 0.113291, re: 127.4581 },
  '12C16O': { Be: 1.93128087, alphaE: 0.01750441, re: 112.8323 },
};

const usualFigures: Readonly<Partial<Record<QuantityKey, number>>> = {
  nu0: 6, omegaE: 6, omegaExe: 4, B0: 5, B1: 5, Be: 5, alphaE: 4, D: 3, re: 5, r0: 5, k: 4,
}; // prettier-ignore

/** A number with so many figures, without a power of ten where the hand would write none. */
function written(value: number, figures: number): string {
  const text = value.toPrecision(figures);
  const plain = text.includes('e') && Math.abs(value) >= 1e-3 && Math.abs(value) < 1e7;
  if (plain) return String(Number(text));
  if (Math.abs(value) < 1e-3 && value !== 0) return value.toExponential(figures - 1);
  return text;
}

/** Two neighbouring, unequal digits exchanged, where it changes the value by more than a hundredth. */
function swapDigits(text: string, random: Random): string {
  const places = [...text.matchAll(/\d(?=\.?\d)/g)]
    .map((match) => match.index)
    .filter((i) => i < 5)
    .map((i) => [i, text[i + 1] === '.' ? i + 2 : i + 1] as const)
    .filter(([i, j]) => text[i] !== text[j] && /\d/.test(text[j] ?? '') && !(i === 0 && text[j] === '0'));
  const swapped = places.map(([i, j]) => {
    const characters = Array.from(text);
    [characters[i], characters[j]] = [characters[j]!, characters[i]!];
    return characters.join('');
  });
  const visible = swapped.filter((each) => Math.abs(Number(each) / Number(text) - 1) > 0.01);
  return visible.length === 0 ? text : random.pick(visible);
}

function swapFields(values: StudentValues, random: Random): StudentValues {
  const pairs: readonly (readonly [QuantityKey, QuantityKey])[] = [['B0', 'B1'], ['Be', 'alphaE'], ['Be', 'B0'], ['k', 'nu0'], ['nu0', 'omegaE'], ['re', 'k']]; // prettier-ignore
  const there = pairs.filter(([a, b]) => values[a] !== undefined && values[b] !== undefined);
  if (there.length === 0) return values;
  const [a, b] = random.pick(there);
  return { ...values, [a]: values[b], [b]: values[a] };
}

/** What stands in the cells, in the units of the columns: rounded, and with the slips of writing down. */
export function writeDown(
  standard: StudentValues,
  course: Course,
  units: ReportUnits,
  slips: ReadonlySet<SlipCode>,
  random: Random,
): Partial<Record<QuantityKey, string>> {
  let values = { ...standard };
  const more = random.uniform() < 0.4 ? 1 : 0;
  const copied = slips.has('value-from-literature') ? (handbook[course.isotopologue] ?? {}) : {};
  // The copier takes alphaE and at times Be with it.
  const taken: QuantityKey[] = random.uniform() < 0.5 ? ['alphaE'] : ['alphaE', 'Be'];
  if (slips.has('fields-swapped')) values = swapFields(values, random);
  const keys = course.quantities.filter((key) => values[key] !== undefined);
  const shifted = random.pick(keys.filter((key) => key !== 'nu0' && key !== 'omegaE'));
  // Not D: its last digits are open anyway.
  const mixed = random.pick(keys.filter((key) => key !== 'D'));
  const power = random.pick([-2, -1, 1, 2, 3]);
  return Object.fromEntries(
    keys.map((key) => {
      let value = values[key]!;
      if (copied[key] !== undefined && taken.includes(key)) return [key, String(copied[key])];
      if (key === 're' || key === 'r0') {
        const wrongUnit = units.length === 'pm' ? 0.01 : units.length === 'Å' ? 100 : 1000;
        value *= lengthFactor[units.length] * (slips.has('unit-r') ? wrongUnit : 1);
      }
      if (key === 'k') {
        const wrongUnit = units.forceConstant === 'N/m' ? random.pick([1000, 0.01]) : 100;
        value *= forceFactor[units.forceConstant] * (slips.has('unit-k') ? wrongUnit : 1);
      }
      if (slips.has('power-of-ten') && key === shifted) value *= 10 ** power;
      let text = written(value, (usualFigures[key] ?? 5) + (key === 'nu0' || key === 'D' ? 0 : more));
      if (slips.has('digits-swapped') && key === mixed) text = swapDigits(text, random);
      return [key, text];
    }),
  );
}
