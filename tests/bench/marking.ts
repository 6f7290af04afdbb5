import type { StudentMethod } from '../../electron/backend/example/student-fit.ts';
import type { SlipCode } from '../../electron/backend/example/student-slips.ts';
import { markSubmission } from '../../shared-core/marking/mark-submission.ts';
import type { MarkedSubmission, MarkedValue } from '../../shared-core/marking/types.ts';
import type { FileReference } from '../../shared-core/reference/types.ts';
import type { QuantityKey } from '../../shared-core/units/types.ts';
import {
  simulatedClass,
  submittedValue,
  type ClassOptions,
  type SimulatedSubmission,
} from '../helpers/simulated-students.ts';
import { truthReference } from '../helpers/truth-reference.ts';
import { benchSettings, fileOf } from './judge.ts';
import { percent, printTable } from './print.ts';

export interface MarkingOptions {
  readonly count: number;
  readonly seed: number;
  /** True: references from the truth, to measure marking by itself and quickly. */
  readonly fromTruth: boolean;
}

const spent = { references: 0, marking: 0, submissions: 0 };

type Maker = typeof import('../../shared-core/reference/make-reference.ts').makeReference;
let makeReference: Maker | null = null;

function referenceOf(one: SimulatedSubmission, fromTruth: boolean): FileReference {
  if (fromTruth || !makeReference) return truthReference(one.spectrum);
  const file = fileOf(one.spectrum, undefined, undefined, one.submission.spectra[0]!.replace('.csv', ''));
  return makeReference({ files: [file], settings: benchSettings });
}

function marked(one: SimulatedSubmission, fromTruth: boolean): MarkedSubmission {
  const started = performance.now();
  const reference = referenceOf(one, fromTruth);
  const between = performance.now();
  const result = markSubmission(
    one.submission,
    [{ file: one.submission.spectra[0]!, reference }],
    one.scheme,
    { stepPerCmOf: () => one.spectrum.wavenumberPerCm[1]! - one.spectrum.wavenumberPerCm[0]! },
  );
  spent.references += between - started;
  spent.marking += performance.now() - between;
  spent.submissions++;
  return result;
}

const valueOf = (result: MarkedSubmission, key: QuantityKey): MarkedValue | undefined =>
  result.values.find((value) => value.quantity === key);

/** Explanations in order, observations that name a slip of the catalogue last. */
function explanations(result: MarkedSubmission): string[] {
  const slips = [...result.slips].sort((a, b) => b.probability - a.probability).map((slip) => slip.code);
  return [...slips, ...result.observations.map((observation) => observation.code)];
}

/** True where some way of committing `other` gives the cells that were handed in: no arithmetic could tell the two apart. */
function looksAlike(one: SimulatedSubmission, other: string): boolean {
  const fits = (codes: readonly SlipCode[], offset: number): boolean => {
    const texts = one.again(codes, offset).texts;
    return one.submission.values.every((value) => {
      const text = texts[value.quantity];
      if (text === undefined || value.value === null) return false;
      const again = submittedValue(value.quantity, text, value.unit).value!;
      const rounding = 2.1 * (value.halfLastDigit ?? 0);
      return Math.abs(again - value.value) <= rounding + 1e-6 * Math.abs(value.value);
    });
  };
  for (let offset = 0; offset < 24; offset++) if (fits([other as SlipCode], offset)) return true;
  return false;
}

interface CorrectnessTally {
  correct: number;
  falseOutside: number;
  partOnly: number;
  wrong: number;
  falseWithin: number;
}

/** Correct values that came out outside, and clearly wrong ones that came out within. */
function tallyValues(one: SimulatedSubmission, result: MarkedSubmission, tally: CorrectnessTally): void {
  if (result.reference?.reliability !== 'sound') return;
  for (const value of one.submission.values) {
    const judged = valueOf(result, value.quantity);
    const right = one.work.unslipped[value.quantity];
    if (!judged || right === undefined || value.value === null || judged.tolerance === null) continue;
    const unslippedText = one.work.unslippedTexts[value.quantity];
    if (unslippedText === value.text) {
      tally.correct++;
      if (judged.agreement === 'outside') {
        tally.falseOutside++;
        note(
          one,
          `correct ${value.quantity} ${value.text} ${value.unit} outside (reference ${judged.reference?.value})`,
        );
      }
      if (judged.agreement === 'part credit') tally.partOnly++;
    } else if (Math.abs(value.value - right) > 1.5 * (judged.tolerance.part ?? judged.tolerance.full)) {
      tally.wrong++;
      if (judged.agreement === 'within') {
        tally.falseWithin++;
        note(one, `wrong ${value.quantity} ${value.text} ${value.unit} within (unslipped ${right})`);
      }
    }
  }
}

function told(one: SimulatedSubmission): string {
  if (one.submission.lines.length > 0) return `${one.submission.lines.length} lines`;
  return one.submission.lineCount === null ? 'nothing' : `the number ${one.submission.lineCount}`;
}

function note(one: SimulatedSubmission, text: string): void {
  console.error(
    `marking ${one.submission.student} seed ${one.spectrum.truth.options.seed} ${one.course.gas} ${one.course.method} [${one.slips.join(' ') || 'honest'}] tells ${told(one)}: ${text}`,
  );
}

const valueTally = (): CorrectnessTally => ({
  correct: 0,
  falseOutside: 0,
  partOnly: 0,
  wrong: 0,
  falseWithin: 0,
});

/** One slip: confusion by first and by first three explanations. */
function singleSlips(options: MarkingOptions): void {
  const students = simulatedClass({
    seed: options.seed,
    count: options.count,
    method: 'cubic',
    gases: ['HCl', 'DCl'],
    slipShare: 0.8,
    slipsEach: 1,
  });
  const tally = valueTally();
  const rows = new Map<
    string,
    { of: number; first: number; alike: number; three: number; offered: Map<string, number> }
  >();
  let [honest, accused, first, alike, three, slipped, notSound] = [0, 0, 0, 0, 0, 0, 0];
  for (const one of students) {
    const result = marked(one, options.fromTruth);
    if (result.reference?.reliability !== 'sound') notSound++;
    tallyValues(one, result, tally);
    if (one.slips.length === 0) {
      honest++;
      if (result.slips.length > 0) {
        accused++;
        note(
          one,
          `explained although honest: ${result.slips.map((s) => `${s.code} ${s.probability.toFixed(2)}`).join(', ')}`,
        );
      }
      continue;
    }
    slipped++;
    const code = one.slips[0]!;
    const offered = explanations(result);
    const isFirst = offered[0] === code;
    const isAlike = isFirst || (offered[0] !== undefined && looksAlike(one, offered[0]));
    const isThree = isAlike || offered.slice(0, 3).includes(code);
    first += isFirst ? 1 : 0;
    alike += isAlike ? 1 : 0;
    three += isThree ? 1 : 0;
    const row = rows.get(code) ?? { of: 0, first: 0, alike: 0, three: 0, offered: new Map<string, number>() };
    row.of++;
    row.first += isFirst ? 1 : 0;
    row.alike += isAlike ? 1 : 0;
    row.three += isThree ? 1 : 0;
    if (!isFirst) row.offered.set(offered[0] ?? '(none)', (row.offered.get(offered[0] ?? '(none)') ?? 0) + 1);
    rows.set(code, row);
    if (!isAlike) {
      note(
        one,
        `reference ${result.reference?.reliability ?? 'absent'}, offered ${result.slips.map((s) => `${s.code} ${s.probability.toFixed(2)}`).join(', ') || 'nothing'}; values ${JSON.stringify(one.work.texts)} unslipped ${JSON.stringify(one.work.unslippedTexts)}`,
      );
    }
  }
  printTable(
    'Slips: what was put in and what was offered first',
    ['slip', 'of', 'first', 'first or alike', 'in first three', 'else offered first'],
    [...rows]
      .sort(([a], [b]) => a.localeCompare(b))
      .map(([code, row]) => [
        code,
        `${row.of}`,
        `${row.first}`,
        `${row.alike}`,
        `${row.three}`,
        [...row.offered].map(([other, n]) => `${other} ${n}`).join(', '),
      ]),
  );
  printTable(
    `Marking of ${options.count} submissions (${options.fromTruth ? 'references from the truth' : 'references from the files'})`,
    ['what', 'share', 'limit'],
    [
      ['first explanation right', percent(first, slipped), ''],
      [
        'first explanation right, or one that no arithmetic tells apart',
        percent(alike, slipped),
        'at least 85 %',
      ],
      ['right among the first three', percent(three, slipped), 'at least 95 %'],
      ['explanation offered for honest work', percent(accused, honest), 'at most 1 %'],
      ...valueRows(tally),
      ['reference not sound', percent(notSound, options.count), ''],
    ],
  );
}

function valueRows(tally: CorrectnessTally): string[][] {
  return [
    [
      `correct values outside (of ${tally.correct})`,
      percent(tally.falseOutside, tally.correct),
      'at most 0.5 %',
    ],
    ['correct values with part credit only', percent(tally.partOnly, tally.correct), ''],
    [
      `clearly wrong values within (of ${tally.wrong})`,
      percent(tally.falseWithin, tally.wrong),
      'at most 1 %',
    ],
  ];
}

/** Two slips at once. */
function doubleSlips(options: MarkingOptions): void {
  const students = simulatedClass({
    seed: options.seed + 1,
    count: Math.max(4, Math.round(options.count / 4)),
    method: 'cubic',
    gases: ['HCl', 'DCl'],
    slipShare: 1,
    slipsEach: 2,
  });
  let [both, overconfident] = [0, 0];
  for (const one of students) {
    const result = marked(one, options.fromTruth);
    const three = explanations(result).slice(0, 3);
    const found = one.slips.filter((code) => three.includes(code)).length;
    if (found === one.slips.length) both++;
    else
      note(
        one,
        `two slips, reference ${result.reference?.reliability ?? 'absent'}, offered ${result.slips.map((s) => `${s.code} ${s.probability.toFixed(2)}`).join(', ') || 'nothing'}; values ${JSON.stringify(one.work.texts)} unslipped ${JSON.stringify(one.work.unslippedTexts)}`,
      );
    const sure = result.slips.filter((slip) => slip.probability > 0.9);
    if (
      sure.some(
        (slip) => !(one.slips as readonly string[]).includes(slip.code) && !looksAlike(one, slip.code),
      )
    ) {
      overconfident++;
    }
  }
  printTable(
    `Two slips at once (${students.length} submissions)`,
    ['what', 'share', 'limit'],
    [
      ['both causes among the first three', percent(both, students.length), 'at least 60 %'],
      [
        'a single wrong cause with probability over 0.9',
        percent(overconfident, students.length),
        'at most 5 %',
      ],
    ],
  );
}

/** Classes by a method that leaves something out, with the number of lines at the student's choice. */
function choiceOfLines(options: MarkingOptions): void {
  const methods: readonly StudentMethod[] = [
    'combination-differences',
    'combination-differences-through-origin',
    'quadratic',
    'midpoint',
    'cubic',
  ];
  const rows: string[][] = [];
  const count = Math.max(6, Math.round(options.count / 5));
  for (const method of methods) {
    const base: ClassOptions = {
      seed: options.seed + 2,
      count,
      method,
      gases: ['HCl', 'DCl'],
      slipShare: 0,
      slipsEach: 0,
      largestM: [6, 8, 12],
    };
    const row: string[] = [method];
    for (const tells of ['nothing', 'count', 'lines'] as const) {
      let [within, of, accused] = [0, 0, 0];
      for (const one of simulatedClass({ ...base, tells })) {
        const result = marked(one, options.fromTruth);
        if (result.slips.length > 0) accused++;
        if (result.reference?.reliability !== 'sound') continue;
        for (const value of result.values) {
          if (value.agreement === 'not given') continue;
          of++;
          if (value.agreement === 'within') within++;
          else
            note(
              one,
              `honest ${value.quantity} ${value.text} ${value.agreement} (tells ${tells}, ${one.work.lines.length} lines, reference ${JSON.stringify(value.reference)} ${value.reason ?? ''})`,
            );
        }
      }
      row.push(`${percent(within, of)}${accused > 0 ? ` (${accused} accused)` : ''}`);
    }
    for (const tells of ['nothing', 'count', 'lines'] as const) {
      let [passed, of] = [0, 0];
      for (const one of simulatedClass({ ...base, slips: ['b0-as-be'], tells })) {
        const result = marked(one, options.fromTruth);
        const value = valueOf(result, 'Be');
        if (!value || result.reference?.reliability !== 'sound') continue;
        of++;
        if (value.agreement === 'within') {
          passed++;
          if (tells !== 'nothing')
            note(
              one,
              `B_0 for Be within (tells ${tells}): ${value.text}, reference ${JSON.stringify(value.reference)}`,
            );
        }
      }
      row.push(`${passed}/${of}`);
    }
    rows.push(row);
  }
  printTable(
    `Choice of lines (|m| to 6, 8, 12): honest values within (at least 99 %), and B_0 for Be passed, by what is told (${count} each)`,
    ['method', 'nothing told', 'number told', 'lines told', 'B_0: nothing', 'B_0: number', 'B_0: lines'],
    rows,
  );
}

export async function benchMarking(options: MarkingOptions, only: string | null): Promise<void> {
  if (!options.fromTruth) {
    makeReference = (await import('../../shared-core/reference/make-reference.ts')).makeReference;
  }
  if (only === null || 'single'.includes(only)) singleSlips(options);
  if (only === null || 'double'.includes(only)) doubleSlips(options);
  if (only === null || 'choice'.includes(only)) choiceOfLines(options);
  const perSubmission = spent.marking / Math.max(1, spent.submissions);
  const perReference = spent.references / Math.max(1, spent.submissions);
  console.log(
    `Marking ${perSubmission.toFixed(2)} ms a submission, reference ${perReference.toFixed(1)} ms: ${options.fromTruth ? 'no ratio (references from the truth)' : `1/${(perReference / perSubmission).toFixed(0)} (at most 1/20)`}`,
  );
}
