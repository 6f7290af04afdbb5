export * from './band-constants.ts';
export * from './formulas.ts';
export * from './isotopologue.ts';
export * from './mass-scaling.ts';
export * from './nuclides.ts';
export * from './physical-constants.ts';
export * from './published-constants.ts';
export type * from './types.ts';
