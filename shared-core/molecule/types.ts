/** One of the two atoms of a diatomic, as a nuclide: symbol with mass number, D for deuterium. */
export interface Nuclide {
  /** "H", "D", "35Cl", "12C", "16O", ... */
  readonly name: string;
  readonly element: string;
  readonly massNumber: number;
  readonly massU: number;
  /** Natural abundance, 0 to 1. */
  readonly abundance: number;
  /** Number of electrons, for nuclear masses. */
  readonly atomicNumber: number;
}

/** An isotopologue of a diatomic: "H35Cl", "12C16O". */
export interface Isotopologue {
  readonly name: string;
  /** Chemical formula without mass numbers: "HCl", "DCl", "CO". */
  readonly gas: string;
  readonly nuclides: readonly [Nuclide, Nuclide];
  readonly reducedMassU: number;
}

/** Constants of a 1-Sigma diatomic, cm-1; used to recognise a band, never as an answer. */
export interface PublishedConstants {
  readonly isotopologue: string;
  readonly omegaEPerCm: number;
  readonly omegaExePerCm: number;
  readonly omegaEyePerCm: number;
  readonly rotationalConstantEquilibriumPerCm: number;
  readonly alphaEPerCm: number;
  readonly gammaEPerCm: number;
  readonly centrifugalConstantPerCm: number;
  /** No 1-Sigma state (NO): this model only averages its lines. */
  readonly openShell: boolean;
  readonly source: string;
}

/** Constants of one band n <- 0 on one wavenumber axis (cm-1). */
export interface BandConstants {
  readonly bandOriginPerCm: number;
  readonly rotationalConstantLowerPerCm: number;
  readonly rotationalConstantUpperPerCm: number;
  readonly centrifugalConstantLowerPerCm: number;
  readonly centrifugalConstantUpperPerCm: number;
  readonly sexticConstantLowerPerCm: number;
  readonly sexticConstantUpperPerCm: number;
}
