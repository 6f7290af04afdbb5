export * from './errors.ts';
export * from './inputs.ts';
export type * from './outputs.ts';
