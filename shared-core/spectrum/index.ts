export { compareSpectra, type SpectrumComparison } from './compare.ts';
export { decodeJcamp } from './jcamp/decode-jcamp.ts';
export { noiseSignature, type NoiseSignature } from './noise-signature.ts';
export { prepareSpectrum, type PrepareOptions } from './prepare/prepare-spectrum.ts';
export { readSpectrumFile } from './read-spectrum-file.ts';
