/**
 * Enough chemistry to invent waters that hang together: pH, alkalinity and conductivity from ions, organic carbon, aluminium and a CO2
 * pressure. On purpose not the product's own engine: demo data must stay the same when the engine changes, and a demo made by the engine
 * would only ever agree with it. Constants are short fits to published values (chemistry of the product: lib/chemistry/data), good to 0.02.
 */

/** Dissolved amounts in mmol/L. */
export interface Ions { Ca: number; Mg: number; Na: number; K: number; NH4: number; Cl: number; SO4: number; NO3: number; F: number }

export interface Surroundings {
  celsius: number;
  /** mg C/L */
  DOC: number;
  /** Labile aluminium, mmol/L. */
  Al: number;
  carbon: { pCO2: number } | { DIC: number };
}

export interface Settled { pH: number; alkalinity: number; DIC: number; conductivity: number }

const quadratic = (a: number, b: number, c: number) => (t: number) => a + b * t + c * t * t;
// Through the values at 0, 10 and 25 °C of Plummer & Busenberg 1982 and of Marshall & Franck 1981.
const pHenry = quadratic(1.108, 0.01723, -1.133e-4);
const pK1 = quadratic(6.579, -0.01328, 1.68e-4);
const pK2 = quadratic(10.629, -0.0155, 1.4e-4);
const pKw = quadratic(14.942, -0.04288, 2.08e-4);
/** Hydrolysis of aluminium at 10 °C, cumulative, from the analytic forms of Nordstrom et al. 1990. */
const AL_HYDROLYSIS = [5.44, 11.17, 18.53, 24.32];
/** Hruška et al. 2003: 8.6 µeq of sites per mg C. */
const ORGANIC_PK = [3.04, 4.51, 6.46];
const SITES = 8.6e-3;
/** Limiting equivalent conductances at 25 °C, S·cm²/eq. */
const CONDUCTANCE: Record<keyof Ions, number> = { Ca: 59.5, Mg: 53.1, Na: 50.1, K: 73.5, NH4: 73.5, Cl: 76.3, SO4: 80, NO3: 71.4, F: 55.4 };
const CHARGE: Record<keyof Ions, number> = { Ca: 2, Mg: 2, Na: 1, K: 1, NH4: 1, Cl: -1, SO4: -2, NO3: -1, F: -1 };
const KEYS = Object.keys(CHARGE) as (keyof Ions)[];

/** Strong bases minus strong acids, meq/L. */
export const strongIonSum = (ions: Ions): number => KEYS.reduce((sum, key) => sum + CHARGE[key] * ions[key], 0);

/** Charge of a stepwise acid per molecule, from cumulative log constants of its forms and the charge of the first. */
function meanCharge(first: number, pCumulative: readonly number[], pH: number): number {
  const weights = [1, ...pCumulative.map((p, k) => 10 ** ((k + 1) * pH - p))];
  const all = weights.reduce((a, b) => a + b, 0);
  return weights.reduce((sum, weight, k) => sum + weight * (first - k), 0) / all;
}

/** Settles a water by electroneutrality (Davies coefficients at the ions' own ionic strength). */
export function settle(ions: Ions, { celsius, DOC, Al, carbon }: Surroundings): Settled {
  const strength = KEYS.reduce((sum, key) => sum + ions[key] * CHARGE[key] ** 2, Math.max(0, strongIonSum(ions))) / 2000;
  const root = Math.sqrt(strength);
  const logGamma = -0.5 * (root / (1 + root) - 0.3 * strength);
  const organicSteps = ORGANIC_PK.map((_, k) => ORGANIC_PK.slice(0, k + 1).reduce((a, b) => a + b, 0));
  const at = (pH: number) => {
    const h = 10 ** (3 - pH - logGamma);
    const oh = 10 ** (3 + pH - pKw(celsius) - logGamma);
    const first = 10 ** (pH - pK1(celsius) - logGamma);
    const second = 10 ** (2 * pH - pK1(celsius) - pK2(celsius) - 4 * logGamma);
    const co2 = "pCO2" in carbon ? 1e3 * carbon.pCO2 * 10 ** -pHenry(celsius) : carbon.DIC / (1 + first + second);
    const alkalinity = co2 * (first + 2 * second) + oh - h;
    const organic = meanCharge(0, organicSteps, pH) * SITES * DOC / 3;
    const aluminium = meanCharge(3, AL_HYDROLYSIS, pH) * Al;
    return { h, oh, alkalinity, DIC: co2 * (1 + first + second), charge: strongIonSum(ions) - alkalinity + organic + aluminium, bicarbonate: co2 * first };
  };
  let low = 2;
  let high = 12;
  for (let k = 0; k < 60; k++) {
    const middle = (low + high) / 2;
    if (at(middle).charge > 0) low = middle; else high = middle;
  }
  const pH = (low + high) / 2;
  const end = at(pH);
  const conductance = KEYS.reduce((sum, key) => sum + CONDUCTANCE[key] * Math.abs(CHARGE[key]) * ions[key], 0)
    + 349.7 * end.h + 198 * end.oh + 44.5 * end.bicarbonate;
  return { pH, alkalinity: end.alkalinity, DIC: end.DIC, conductivity: conductance * 10 ** (2 * logGamma) };
}
