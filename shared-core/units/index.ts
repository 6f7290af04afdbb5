export * from './format.ts';
export * from './quantities.ts';
export * from './read-number.ts';
export * from './read-quantity.ts';
export * from './types.ts';
