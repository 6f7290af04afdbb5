export { analyseSpectrum } from './analyse-spectrum.ts';
export { combineAnalyses } from './combine.ts';
export { makeReference, plainSettings } from './make-reference.ts';
export type * from './types.ts';
