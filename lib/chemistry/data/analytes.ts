/** What a row of analyses may hold: key, words of the trade for it, the component it is a total of, and its usual unit. */
import { molarMassOf } from "./formula";
import type { Analyte } from "./types";

type Given = Pick<Analyte, "key" | "component" | "strongCharge" | "description"> & Partial<Analyte> & { synonyms: string[] };

function analyte({ formula = "", kind = "total", defaultUnit = "mg/L", ...given }: Given): Analyte {
  const ownFormula = formula || given.key;
  return { kind, formula: ownFormula, defaultUnit, molarMass: molarMassOf(ownFormula) ?? NaN, ...given };
}

export const ANALYTES: readonly Analyte[] = [
  analyte({ key: "Na", component: "Na^+", strongCharge: 1, description: "Sodium", synonyms: ["na+", "sodium"] }),
  analyte({ key: "K", component: "K^+", strongCharge: 1, description: "Potassium", synonyms: ["k+", "potassium"] }),
  analyte({ key: "NH4", component: "NH4^+", strongCharge: 1, description: "Ammonium (with ammonia)", synonyms: ["nh4+", "ammonium", "ammonia"], namedBasis: { ammonia: "NH3" } }),
  analyte({ key: "Ca", component: "Ca^2+", strongCharge: 2, description: "Calcium", synonyms: ["ca2+", "ca++", "calcium"] }),
  analyte({ key: "Mg", component: "Mg^2+", strongCharge: 2, description: "Magnesium", synonyms: ["mg2+", "mg++", "magnesium"] }),
  analyte({ key: "Sr", component: "Sr^2+", strongCharge: 2, description: "Strontium", synonyms: ["sr2+", "sr++", "strontium"] }),
  analyte({ key: "Ba", component: "Ba^2+", strongCharge: 2, description: "Barium", synonyms: ["ba2+", "ba++", "barium"] }),
  analyte({ key: "Al", component: "Al^3+", strongCharge: 0, description: "Inorganic monomeric (labile) aluminium", synonyms: ["al3+", "aluminium", "aluminum", "labile aluminium"] }),
  analyte({ key: "Cl", component: "Cl^-", strongCharge: -1, description: "Chloride", synonyms: ["cl-", "chloride"] }),
  analyte({ key: "NO3", component: "NO3^-", strongCharge: -1, description: "Nitrate", synonyms: ["no3-", "nitrate"] }),
  analyte({ key: "NO2", component: "NO2^-", strongCharge: -1, description: "Nitrite", synonyms: ["no2-", "nitrite"] }),
  analyte({ key: "SO4", component: "SO4^2-", strongCharge: -2, description: "Sulphate", synonyms: ["so42-", "so4--", "sulphate", "sulfate"] }),
  analyte({ key: "F", component: "F^-", strongCharge: -1, description: "Fluoride", synonyms: ["f-", "fluoride"] }),
  analyte({ key: "PO4", component: "H2PO4^-", strongCharge: 0, description: "Orthophosphate", synonyms: ["po43-", "phosphate", "orthophosphate"] }),
  analyte({ key: "Si", component: "H4SiO4", strongCharge: 0, description: "Dissolved silicon", synonyms: ["silicon", "silica", "sio2", "dissolved silica"], namedBasis: { silica: "SiO2", sio2: "SiO2", "dissolved silica": "SiO2" } }),
  analyte({ key: "alkalinity", component: null, strongCharge: 0, kind: "equivalents", formula: "CaCO3", defaultUnit: "meq/L", description: "Inorganic alkalinity to the CO2 end point", synonyms: ["alk", "total alkalinity", "m-alkalinity", "hco3", "hco3-", "bicarbonate", "hydrogencarbonate"], namedBasis: { hco3: "HCO3", "hco3-": "HCO3", bicarbonate: "HCO3", hydrogencarbonate: "HCO3" } }),
  analyte({ key: "ANC", component: null, strongCharge: 0, kind: "equivalents", formula: "CaCO3", defaultUnit: "ueq/L", description: "Acid neutralising capacity", synonyms: ["acid neutralising capacity", "acid neutralizing capacity"] }),
  analyte({ key: "DIC", component: "CO2(aq)", strongCharge: 0, kind: "carbon", formula: "C", defaultUnit: "mmol/L", description: "Dissolved inorganic carbon", synonyms: ["tic", "dissolved inorganic carbon", "total inorganic carbon"] }),
  analyte({ key: "DOC", component: null, strongCharge: 0, kind: "organic", formula: "C", description: "Dissolved organic carbon", synonyms: ["dissolved organic carbon"] }),
];
