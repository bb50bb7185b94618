/**
 * The Sallowmere scenario: an invented upland district with invented waters. Nothing here was measured anywhere. About 240 analyses from
 * November 2023 to October 2026, as the Sallowmere Water Laboratory would have kept them, with a few faults planted for the checks to find.
 */
import { normal } from "./counter-random";
import { type Ions, settle } from "./plausible-water";

export type DemoRow = Record<string, unknown> & { id: string; site: string; date: string };
export interface DemoSet { name: string; description: string; units: Record<string, string>; rows: DemoRow[] }

interface Site {
  name: string;
  code: string;
  set: string;
  /** Days between rounds, and extra rounds after heavy rain. */
  every: number;
  storms: number;
  /** Typical values, mg/L (NO3 as N); Al labile, µg/L. */
  typical: { Ca: number; Mg: number; Na: number; K: number; Cl: number; SO4: number; NO3: number; Si: number; F: number; DOC: number; Al: number };
  logPressure: number;
  celsius: { mean: number; swing: number };
  /** How strongly high flow thins what rock gives and carries what peat gives. */
  flow: number;
}

const SITES: readonly Site[] = [
  { name: "Kiln Well", code: "KW", set: "springs", every: 60, storms: 0, typical: { Ca: 92, Mg: 4.5, Na: 8, K: 1.2, Cl: 14, SO4: 22, NO3: 3.2, Si: 3.6, F: 0.09, DOC: 0.8, Al: 0 }, logPressure: -1.95, celsius: { mean: 8.6, swing: 0.5 }, flow: 0.03 },
  { name: "Marl Spring", code: "MS", set: "springs", every: 60, storms: 0, typical: { Ca: 104, Mg: 6.4, Na: 9.4, K: 1.5, Cl: 17, SO4: 31, NO3: 4.4, Si: 4.1, F: 0.11, DOC: 1.1, Al: 0 }, logPressure: -1.8, celsius: { mean: 9.1, swing: 0.7 }, flow: 0.04 },
  { name: "Quern Beck at Upper Weir", code: "QU", set: "becks", every: 31, storms: 1, typical: { Ca: 38, Mg: 3.2, Na: 5.5, K: 0.9, Cl: 9, SO4: 12, NO3: 0.7, Si: 2.6, F: 0.06, DOC: 3.4, Al: 0 }, logPressure: -3.15, celsius: { mean: 8, swing: 5 }, flow: 0.16 },
  { name: "Quern Beck at Lower Ford", code: "QL", set: "becks", every: 31, storms: 1, typical: { Ca: 58, Mg: 5.2, Na: 8.2, K: 1.5, Cl: 14, SO4: 22, NO3: 1.8, Si: 2.9, F: 0.07, DOC: 3.9, Al: 0 }, logPressure: -2.95, celsius: { mean: 8.8, swing: 5.4 }, flow: 0.15 },
  { name: "Osier Beck", code: "OB", set: "becks", every: 31, storms: 1, typical: { Ca: 46, Mg: 8.4, Na: 7.1, K: 1.7, Cl: 12, SO4: 27, NO3: 2.3, Si: 3.3, F: 0.08, DOC: 4.6, Al: 0 }, logPressure: -2.85, celsius: { mean: 9.2, swing: 5.8 }, flow: 0.18 },
  { name: "Hag Water", code: "HW", set: "peat", every: 45, storms: 3, typical: { Ca: 1.7, Mg: 0.8, Na: 4.6, K: 0.35, Cl: 6.6, SO4: 4.1, NO3: 0.08, Si: 1.6, F: 0.03, DOC: 15, Al: 45 }, logPressure: -2.75, celsius: { mean: 7.2, swing: 5.2 }, flow: 0.22 },
  { name: "Blackrush Sike", code: "BS", set: "peat", every: 45, storms: 3, typical: { Ca: 1.1, Mg: 0.6, Na: 4.9, K: 0.3, Cl: 7.2, SO4: 5.6, NO3: 0.1, Si: 1.3, F: 0.04, DOC: 10.5, Al: 160 }, logPressure: -2.8, celsius: { mean: 6.9, swing: 5 }, flow: 0.2 },
  { name: "Tarnhead", code: "TH", set: "tarns", every: 61, storms: 0, typical: { Ca: 3.2, Mg: 1, Na: 4.4, K: 0.4, Cl: 6.3, SO4: 5, NO3: 0.12, Si: 0.9, F: 0.04, DOC: 3.8, Al: 6 }, logPressure: -3.2, celsius: { mean: 8.4, swing: 6.8 }, flow: 0.06 },
  { name: "Little Tarnhead", code: "LT", set: "tarns", every: 61, storms: 0, typical: { Ca: 1.75, Mg: 0.75, Na: 4.2, K: 0.35, Cl: 6.3, SO4: 4.8, NO3: 0.09, Si: 0.7, F: 0.03, DOC: 4.8, Al: 22 }, logPressure: -3.1, celsius: { mean: 8.1, swing: 6.9 }, flow: 0.07 },
];

const FIRST_DAY = Date.UTC(2023, 10, 6);
const LAST_DAY = Date.UTC(2026, 9, 31);
const DAY = 86_400_000;
const MASS = { Ca: 40.078, Mg: 24.305, Na: 22.99, K: 39.098, Cl: 35.45, SO4: 96.056, NO3: 14.007, NH4: 14.007, F: 18.998, Al: 26.982 };
/** Reporting limits, mg/L; µg/L for Al. */
const LIMIT = { F: 0.05, NO3: 0.05, NH4: 0.02, Al: 10 };
/** Relative standard errors of the laboratory. */
const ERROR = { Ca: 0.012, Mg: 0.015, Na: 0.015, K: 0.02, Cl: 0.015, SO4: 0.015, NO3: 0.03, Si: 0.02, DOC: 0.03, Al: 0.05, F: 0.05 };

const rounded = (x: number, digits: number) => Number(x.toPrecision(digits));

/** Days on which a site was visited: the regular rounds, shifted by a day or three as rounds are, and some after heavy rain. */
function visits(site: Site): { day: number; isStorm: boolean }[] {
  const days: { day: number; isStorm: boolean }[] = [];
  for (let k = 0; FIRST_DAY + k * site.every * DAY <= LAST_DAY; k++) {
    days.push({ day: FIRST_DAY + (k * site.every + Math.round(1.2 * normal(`${site.code}/round/${k}`))) * DAY, isStorm: false });
  }
  for (let k = 0; k < site.storms; k++) days.push({ day: Date.UTC(2024 + k, k % 2 === 0 ? 10 : 1, 9 + site.code.charCodeAt(0) % 9), isStorm: true });
  return days.filter(({ day }) => day <= LAST_DAY).sort((a, b) => a.day - b.day);
}

interface Truth { ions: Ions; Si: number; DOC: number; Al: number; celsius: number; pCO2: number }

/** What the water was: the season's flow thins what rock gives and brings what peat and sea give. */
function truth(site: Site, day: number, isStorm: boolean): Truth {
  const key = `${site.code}/${day}`;
  const season = Math.cos((2 * Math.PI * (day - Date.UTC(2024, 0, 25))) / (365.25 * DAY)); // 1 in late January
  const wet = 0.5 * season + 0.6 * normal(`${key}/flow`) + (isStorm ? 2.2 : 0);
  const rock = Math.exp(-site.flow * wet);
  const peat = Math.exp(0.16 * wet - 0.22 * season);
  const sea = Math.exp(0.08 * normal(`${key}/sea`) + 0.06 * season);
  const own = (field: string, spread = 0.05) => Math.exp(spread * normal(`${key}/${field}`));
  const { typical } = site;
  const celsius = site.celsius.mean - site.celsius.swing * season + 0.12 * site.celsius.swing * normal(`${key}/celsius`);
  return {
    ions: {
      Ca: typical.Ca * rock * own("Ca", 0.03) / MASS.Ca, Mg: typical.Mg * rock * own("Mg", 0.03) / MASS.Mg,
      Na: typical.Na * sea * own("Na", 0.02) / MASS.Na, K: typical.K * own("K", 0.1) / MASS.K,
      NH4: 0.012 * own("NH4", 0.9) / MASS.NH4, Cl: typical.Cl * sea * own("Cl", 0.02) / MASS.Cl,
      SO4: typical.SO4 * Math.sqrt(rock) * own("SO4", 0.04) / MASS.SO4, NO3: typical.NO3 * Math.exp(0.3 * season) * own("NO3", 0.15) / MASS.NO3,
      F: typical.F * own("F", 0.12) / MASS.F,
    },
    Si: typical.Si * rock * own("Si", 0.08), DOC: typical.DOC * peat * own("DOC", 0.08), Al: typical.Al * peat * own("Al", 0.15),
    celsius: Math.max(0.4, celsius), pCO2: 10 ** (site.logPressure - 0.1 * season + 0.09 * normal(`${key}/pCO2`)),
  };
}

/** A value as the laboratory reports it: with its error, rounded, and "<limit" where it is below the limit. */
function reported(key: string, field: keyof typeof ERROR, value: number, digits = 3): number {
  return rounded(value * (1 + ERROR[field] * normal(`${key}/error/${field}`)), digits);
}

function analysis(site: Site, day: number, isStorm: boolean): DemoRow {
  const { ions, Si, DOC, Al, celsius, pCO2 } = truth(site, day, isStorm);
  const date = new Date(day).toISOString().slice(0, 10);
  const key = `${site.code}/${day}/laboratory`;
  const field = settle(ions, { celsius, DOC, Al: Al / 1000 / MASS.Al, carbon: { pCO2 } });
  // Springs and tarns were measured in the laboratory: the closed bottle had warmed by then.
  const isBench = site.set === "springs" || site.set === "tarns";
  const bench = 19.5 + Math.abs(normal(`${key}/bench`));
  const measured = isBench ? settle(ions, { celsius: bench, DOC, Al: Al / 1000 / MASS.Al, carbon: { DIC: field.DIC } }) : field;
  const mg = (ion: keyof typeof ERROR & keyof Ions) => reported(key, ion, ions[ion] * MASS[ion]);
  const limited = (value: number, limit: number, unit: string, digits = 2) =>
    (value < limit ? `<${limit} ${unit}` : `${rounded(value, digits)} ${unit}`);
  return {
    id: `${site.code}-${date}`, site: site.name, date, temperature: Number(celsius.toFixed(1)),
    pH: Number((measured.pH + 0.03 * normal(`${key}/error/pH`)).toFixed(2)), ...(isBench ? { pHTemperature: Number(bench.toFixed(1)) } : {}),
    conductivity: rounded(field.conductivity * (1 + 0.015 * normal(`${key}/error/conductivity`)), 3),
    Ca: mg("Ca"), Mg: mg("Mg"), Na: mg("Na"), K: mg("K"), Cl: mg("Cl"), SO4: mg("SO4"),
    NO3: limited(reported(key, "NO3", ions.NO3 * MASS.NO3), LIMIT.NO3, "mg/L as N"),
    NH4: limited(ions.NH4 * MASS.NH4, LIMIT.NH4, "mg/L as N"),
    F: limited(reported(key, "F", ions.F * MASS.F), LIMIT.F, "mg/L"),
    Si: reported(key, "Si", Si), alkalinity: Number((field.alkalinity * (1 + 0.008 * normal(`${key}/error/alkalinity`))).toFixed(3)),
    DOC: { value: reported(key, "DOC", DOC), unit: "mg/L", fraction: "filtered" },
    ...(site.typical.Al > 0 ? { Al: aluminium(reported(key, "Al", Al, 2)) } : {}),
  };
}

const aluminium = (value: number) =>
  value < LIMIT.Al ? { value: LIMIT.Al, unit: "ug/L", below: true, fraction: "labile" } : { value, unit: "ug/L", fraction: "labile" };

/** Planted on purpose, so that the checks have something to find; the set's description says so. */
const FAULTS: { site: string; place: number; fault: (row: DemoRow) => void }[] = [
  // Calcium written down in mmol/L under a heading of mg/L.
  { site: "OB", place: 14, fault: (row) => { row.Ca = rounded(Number(row.Ca) / MASS.Ca, 3); } },
  // Alkalinity in mg/L as CaCO3 under a heading of meq/L.
  { site: "MS", place: 7, fault: (row) => { row.alkalinity = Math.round(Number(row.alkalinity) * 50.04); } },
  // A poor ion balance: chloride ten times too high, as from a slipped decimal point.
  { site: "QU", place: 22, fault: (row) => { row.Cl = rounded(Number(row.Cl) * 10, 3); } },
  // Calcium and magnesium exchanged.
  { site: "QL", place: 9, fault: (row) => { [row.Ca, row.Mg] = [row.Mg, row.Ca]; } },
  // Chloride never came back from the laboratory.
  { site: "QL", place: 27, fault: (row) => { delete row.Cl; } },
  // Magnesium missing in a brown water.
  { site: "HW", place: 11, fault: (row) => { delete row.Mg; } },
];

const SETS: Record<string, { name: string; text: string }> = {
  springs: { name: "Sallowmere springs (invented)", text: "Kiln Well and Marl Spring, every two months; pH measured in the laboratory." },
  becks: { name: "Sallowmere becks (invented)", text: "Quern Beck at Upper Weir and Lower Ford, and Osier Beck, monthly; pH measured in the field." },
  peat: { name: "Sallowmere peat streams (invented)", text: "Hag Water and Blackrush Sike, every six weeks and after heavy rain; aluminium is the labile part." },
  tarns: { name: "Sallowmere tarns (invented)", text: "Tarnhead and Little Tarnhead, every two months; pH measured in the laboratory." },
};

const UNITS: Record<string, string> = { Ca: "mg/L", Mg: "mg/L", Na: "mg/L", K: "mg/L", Cl: "mg/L", SO4: "mg/L", Si: "mg/L", alkalinity: "meq/L" };

/** The four sample sets, the same in every clone. */
export function sallowmereSets(): DemoSet[] {
  return Object.entries(SETS).map(([key, { name, text }]) => {
    const rows = SITES.filter((site) => site.set === key).flatMap((site) => {
      const list = visits(site).map(({ day, isStorm }) => analysis(site, day, isStorm));
      for (const { site: code, place, fault } of FAULTS) if (code === site.code) fault(list[place]);
      return list;
    });
    rows.sort((a, b) => (a.date === b.date ? (a.id < b.id ? -1 : 1) : a.date < b.date ? -1 : 1));
    return {
      name, units: UNITS, rows,
      description: `Invented data for trying Tufa; nothing here was measured. ${text} November 2023 to October 2026. A few faults are planted for the checks to find.`,
    };
  });
}
