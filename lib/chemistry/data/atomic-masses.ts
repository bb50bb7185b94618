/** Standard atomic masses, g/mol (IUPAC 2021, abridged). */
export const ATOMIC_MASSES: Readonly<Record<string, number>> = {
  H: 1.008, C: 12.011, N: 14.007, O: 15.999, F: 18.998, Na: 22.99, Mg: 24.305, Al: 26.982, Si: 28.085, P: 30.974, S: 32.06,
  Cl: 35.45, K: 39.098, Ca: 40.078, Sr: 87.62, Ba: 137.327,
};
