/**
 * What counts as wrong in a reference, on the file's own wavenumber axis; a sound one keeps three standard uncertainties inside.
 * ν̃0 0.1 cm-1, Be 0.15 % (a fifth of the distance between Be and B_0 of HCl), αe 3 %: common practice of teaching labs.
 */
export const countsAsWrong = {
  bandOriginPerCm: 0.1,
  rotationalConstantRelative: 0.0015,
  alphaERelative: 0.03,
} as const;

/** Fewest used lines in each branch of a sound reference. */
export const fewestLinesPerBranch = 5;

/** Largest error of a teaching instrument's wavenumber axis that passes without a look, ppm (real ones: up to 160). */
export const largestAxisScalePpm = 300;
