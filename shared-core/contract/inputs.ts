import { z } from 'zod';
import { quantityKeys } from '../units/types.ts';

const id = z.number().int().positive();
const shortText = z.string().max(500);
const longText = z.string().max(10_000);
const fileName = z.string().min(1).max(1000);
const isotopologueName = z.string().max(20);
const quantity = z.enum(quantityKeys);
const json = z.record(z.string(), z.unknown());

const role = z.union([
  z.strictObject({
    role: z.enum([
      'student', 'name', 'group', 'attempt', 'received', 'isotopologue', 'spectrum', 'line-count', 'comment',
      'quantity-name', 'value', 'unit', 'uncertainty', 'branch', 'J', 'm', 'wavenumber', 'ignore',
    ]),
  }),
  z.strictObject({ role: z.literal('quantity'), quantity, unit: z.string().max(40).nullable(), isotopologue: isotopologueName.nullable() }),
]); // prettier-ignore

const correction = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('ordinate'), ordinate: z.enum(['absorbance', 'transmittance', 'percent-transmittance']) }),
  z.strictObject({ kind: z.literal('range'), fromPerCm: z.number(), toPerCm: z.number() }),
  z.strictObject({ kind: z.literal('isotopologues'), names: z.array(isotopologueName).min(1).max(10) }),
  z.strictObject({ kind: z.literal('index-shift'), isotopologue: isotopologueName, band: z.string().max(10), shift: z.number().int().min(-5).max(5) }),
  z.strictObject({ kind: z.literal('line-out'), lineId: z.string().max(60) }),
  z.strictObject({ kind: z.literal('line-in'), lineId: z.string().max(60) }),
  z.strictObject({ kind: z.literal('line-moved'), lineId: z.string().max(60), wavenumberPerCm: z.number() }),
  z.strictObject({ kind: z.literal('outlier-accepted'), lineId: z.string().max(60) }),
]); // prettier-ignore

const gradesOptions = z.strictObject({
  separator: z.enum([',', ';', '\t']).optional(),
  decimalSign: z.enum(['.', ',']).optional(),
  places: z.number().int().min(0).max(6).nullable().optional(),
  names: z.boolean().optional(),
  perValue: z.boolean().optional(),
  columns: z.array(z.string().max(200)).max(200).optional(),
});

const ruling = z.strictObject({
  action: z.enum(['accept', 'points', 'defer', 'excuse', 'clear']),
  points: z.number().min(0).max(1000).nullable(),
  comment: longText,
});

/** Validators of the inputs, by method; a call whose input does not fit is refused before anything is done. */
export const inputs = {
  'app.info': z.strictObject({}),
  'settings.get': z.strictObject({ key: shortText }),
  'settings.set': z.strictObject({ key: shortText, value: z.string().max(20_000) }),
  'sections.list': z.strictObject({}),
  'sections.create': z.strictObject({ title: z.string().trim().min(1).max(200) }),
  'sections.rename': z.strictObject({ sectionId: id, title: z.string().trim().min(1).max(200) }),
  'sections.copy': z.strictObject({ sectionId: id, title: z.string().trim().min(1).max(200) }),
  'sections.remove': z.strictObject({ sectionId: id }),
  'sections.get': z.strictObject({ sectionId: id }),
  'sections.makeExample': z.strictObject({}),
  'scheme.starters': z.strictObject({}),
  'scheme.check': z.strictObject({ scheme: json }),
  'scheme.preview': z.strictObject({ sectionId: id, scheme: json }),
  'scheme.save': z.strictObject({ sectionId: id, scheme: json }),
  'intake.current': z.strictObject({ sectionId: id }),
  'intake.begin': z.strictObject({ sectionId: id }),
  'intake.putPart': z.strictObject({
    intakeId: id,
    fileName,
    offset: z.number().int().min(0),
    base64: z.string().max(3_000_000),
    last: z.boolean(),
  }),
  'intake.view': z.strictObject({ intakeId: id }),
  'intake.setColumn': z.strictObject({ intakeId: id, fileName, index: z.number().int().min(0), role }),
  'intake.setMatch': z.strictObject({ intakeId: id, fileName, students: z.array(shortText).max(50) }),
  'intake.commit': z.strictObject({ intakeId: id }),
  'intake.cancel': z.strictObject({ intakeId: id }),
  'references.list': z.strictObject({ sectionId: id }),
  'references.get': z.strictObject({ fileId: id }),
  'references.spectrum': z.strictObject({ fileId: id }),
  'references.correct': z.strictObject({ fileId: id, correction }),
  'references.takeBack': z.strictObject({ fileId: id, index: z.number().int().min(0) }),
  'jobs.state': z.strictObject({ sectionId: id }),
  'jobs.cancel': z.strictObject({ sectionId: id }),
  'jobs.resume': z.strictObject({ sectionId: id }),
  'review.list': z.strictObject({ sectionId: id }),
  'review.get': z.strictObject({ submissionId: id }),
  'review.decide': z.strictObject({ submissionId: id, isotopologue: isotopologueName, quantity, ruling }),
  'review.sameSlip': z.strictObject({ sectionId: id, code: shortText }),
  'review.decideMany': z.strictObject({
    values: z
      .array(z.strictObject({ submissionId: id, isotopologue: isotopologueName, quantity }))
      .min(1)
      .max(5000),
    ruling,
  }),
  'review.handPoints': z.strictObject({
    submissionId: id,
    item: shortText,
    points: z.number().min(0).max(1000).nullable(),
  }),
  'review.comment': z.strictObject({ submissionId: id, comment: longText }),
  'export.preview': z.strictObject({ sectionId: id, options: gradesOptions }),
  'export.grades': z.strictObject({ sectionId: id, options: gradesOptions }),
  'export.report': z.strictObject({ sectionId: id }),
  'export.feedback': z.strictObject({ sectionId: id, withReference: z.boolean(), withNames: z.boolean() }),
  'export.summary': z.strictObject({ sectionId: id }),
  'export.records': z.strictObject({ sectionId: id }),
  'journal.list': z.strictObject({ sectionId: id }),
  'journal.undo': z.strictObject({ sectionId: id }),
  'journal.redo': z.strictObject({ sectionId: id }),
} as const;

export type MethodName = keyof typeof inputs;
export type InputOf<M extends MethodName> = z.infer<(typeof inputs)[M]>;
export const methodNames = Object.keys(inputs) as MethodName[];
export type Ruling = z.infer<typeof ruling>;
export type GradesInput = z.infer<typeof gradesOptions>;
