export { analyseSpectrum, type SpectrumAnalysis } from './analyse-spectrum.ts';
export { combineAnalyses } from './combine.ts';
export { analyseFile, makeReference, plainSettings, type ReferenceInput } from './make-reference.ts';
export { referenceFor } from './reference-for.ts';
export type * from './types.ts';
