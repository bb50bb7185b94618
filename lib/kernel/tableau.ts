/**
 * The chemical problem as the kernel sees it: a tableau of species over components, without names or units beyond mol/kg.
 *
 * Storage order: component 0 is the hydrogen ion, component 1 inorganic carbon (CO2(aq)), the others follow; species 0 … n−1 are
 * the components' own species in the same order, formed species after them, each after everything it is made of.
 *
 *   ln c_i = ln K_i + Σ_j ν_ij·x_j + w_i·ln a_w − ln γ_i        x_j = ln activity of component j, c in mol/kg
 *
 * With neutral CO2(aq), H4SiO4 and undissociated organic acid as components, the balance of hydrogen Σ ν_iH·c_i is the charge of all
 * species less that of the component totals, so "electroneutral" or "this ANC" is a value of the hydrogen total (which may be
 * negative). Tableau of components and species: Morel & Morgan 1972, Environ. Sci. Technol. 6:58.
 */
export interface Tableau {
  /** Components (n). */
  componentCount: number;
  /** Species (ns). */
  speciesCount: number;
  /** ν, row-major ns × n. */
  nu: Float64Array;
  /** w, ns: water molecules taken up on formation. */
  water: Float64Array;
  /** z, ns. */
  charge: Float64Array;
  /** z of the components, n. */
  componentCharge: Float64Array;
  /** Equivalents of inorganic alkalinity per mole, ns; 0 for aluminium and organic species. */
  alkalinity: Float64Array;
  /** Class of activity coefficient, ns, into `gamma`. */
  gammaClass: Int32Array;
  gamma: GammaTable;
  /**
   * Species whose constant depends on pH (the anion of the one-site organic model), or −1: then
   * ln c_v = ln c_acid + q(x_H) + ln γ_H with q(x) = −ln 10·(k0 + k1·p + k2·p²) − x, p = −x/ln 10.
   */
  varying: number;
  varyingAcid: number;
  varyingFit: [number, number, number];
}

/**
 * Activity coefficients in classes k of equal form, all of one shape:
 *   log10 γ_k = −A·z²·√I/(1 + d·√I) + β·I,  or a multiple of log10 γ of hydrogen for conditional constants.
 */
export interface GammaTable {
  count: number;
  isIdeal: boolean;
  /** z². */
  squaredCharge: Float64Array;
  /** å of the ion; d = B·å, or d = 1 where å is 0. */
  ionSize: Float64Array;
  /** β as published (neutral species, Truesdell–Jones b). */
  slope: Float64Array;
  /** β in units of A·z² (0.3 for Davies). */
  relativeSlope: number;
  /** Nonzero: ln γ_k = multiple·ln γ of hydrogen; the other fields are not used. */
  hydrogenMultiple: Float64Array;
  hydrogenClass: number;
}

/** What depends on the temperature only; filled once per distinct temperature. */
export interface Constants {
  /** ln K of each species from the components, ns. */
  lnK: Float64Array;
  /** ln K of each solid's dissolution into components. */
  solidLnK: Float64Array;
  /** ln of the Henry constant: a(CO2(aq)) = K·pCO2. */
  gasLnK: number;
  /** Debye–Hückel slope (log10 units, (kg/mol)^½) and its ion-size factor (1/Å). */
  debyeA: number;
  debyeB: number;
}

/** A reaction that ties activities: ν·x + w·ln a_w = ln K (+ SI·ln 10). Solids and the gas are all of this form. */
export interface Phase { nu: Float64Array; water: number }
