/** Publications behind the figures of the constants set, by the key that the data files use. */
export const SOURCES = {
  "plummer-busenberg-1982": { citation: "Plummer & Busenberg 1982, Geochimica et Cosmochimica Acta 46:1011–1040" },
  "marshall-franck-1981": { citation: "Marshall & Franck 1981, J. Phys. Chem. Ref. Data 10:295, as fitted in Nordstrom et al. 1990, ACS Symp. Ser. 416:398–413" },
  "nordstrom-1990": { citation: "Nordstrom, Plummer, Langmuir, Busenberg, May, Jones & Parkhurst 1990, Revised chemical equilibrium data for major water–mineral reactions and their limitations, ACS Symp. Ser. 416:398–413" },
  "stumm-morgan-1996": { citation: "Stumm & Morgan 1996, Aquatic Chemistry, 3rd ed., Wiley" },
  "kielland-1937": { citation: "Kielland 1937, J. Am. Chem. Soc. 59:1675–1678" },
  "truesdell-jones-1974": { citation: "Truesdell & Jones 1974, J. Res. U.S. Geol. Survey 2:233–248" },
  "robinson-stokes-1959": { citation: "Robinson & Stokes 1959, Electrolyte Solutions, 2nd ed., Butterworths" },
  "iupac-2021": { citation: "IUPAC 2021, standard atomic weights, abridged" },
} as const satisfies Record<string, { citation: string }>;

export type SourceKey = keyof typeof SOURCES;
