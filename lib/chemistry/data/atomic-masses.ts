/** Standard atomic masses, g/mol (IUPAC 2021, abridged). */
export const ATOMIC_MASSES: Readonly<Record<string, number>> = {
  H: 1.008, C: 12.011, N: 14.007, O: 15.999, F: 18.998, Na: 22.99, Mg: 24.305, Al: 26.982, Si: 28.085, P: 30.974, S: 32.06,
  Cl: 35.45, K: 39.098, Ca: 40.078, Sr: 87.62, Ba: 137.327,
};

/** More of them, for the species that a spec brings (IUPAC 2021, abridged; from memory). */
export const MORE_ATOMIC_MASSES: Readonly<Record<string, number>> = {
  Li: 6.94, Be: 9.0122, B: 10.81, Ti: 47.867, V: 50.942, Cr: 51.996, Mn: 54.938, Fe: 55.845, Co: 58.933, Ni: 58.693, Cu: 63.546, Zn: 65.38,
  As: 74.922, Se: 78.971, Br: 79.904, Rb: 85.468, Y: 88.906, Mo: 95.95, Ag: 107.87, Cd: 112.41, Sn: 118.71, Sb: 121.76, I: 126.9, Cs: 132.91,
  La: 138.91, Ce: 140.12, W: 183.84, Hg: 200.59, Tl: 204.38, Pb: 207.2, Bi: 208.98, Th: 232.04, U: 238.03,
};
