export { noiseSignature, type NoiseSignature } from './noise-signature.ts';
export { prepareSpectrum } from './prepare/prepare-spectrum.ts';
export { readSpectrumFile } from './read-spectrum-file.ts';
