/** How figures become results: each method with its formula, source and range, as data beside the constants. */
export interface Method { name: string; formula: string; source: string; range: string; fromMemory: boolean }

const given = (name: string, formula: string, source: string, range = ""): Method => ({ name, formula, source, range, fromMemory: false });
const recalled = (name: string, formula: string, source: string, range = ""): Method => ({ ...given(name, formula, source, range), fromMemory: true });

export const METHODS: readonly Method[] = [
  given("log K, analytic", "log K = a + bT·T + (c/T)/T + (d·log10T)·log10 T + (e/T2)/T², T in kelvin", "form as printed by each source", "0–90 °C"),
  given("log K, van 't Hoff", "log K(T) = log K(25 °C) − ΔH/(ln 10·R)·(1/T − 1/298.15), R = 8.314462618 J/mol/K", "CODATA 2018 for R", "ΔH taken as constant"),
  given("activity: ideal", "γ = 1, a(H2O) = 1", ""),
  given("activity: guntelberg", "log γ = −A z² √I/(1 + √I)", "Güntelberg 1926", "I < 0.1 mol/kg"),
  given("activity: davies", "log γ = −A z² (√I/(1 + √I) − 0.3 I)", "Davies 1962", "I < 0.5 mol/kg"),
  given("activity: debye-huckel", "log γ = −A z² √I/(1 + B å √I)", "Kielland 1937, J. Am. Chem. Soc. 59:1675", "I < 0.1 mol/kg"),
  recalled("activity: truesdell-jones", "log γ = −A z² √I/(1 + B å √I) + b·I; extended Debye–Hückel for ions without a and b", "Truesdell & Jones 1974, J. Res. U.S. Geol. Surv. 2:233", "I < 1 mol/kg"),
  given("activity of neutral species", "log γ = 0.1·I", "common practice"),
  given("activity of water", "a(H2O) = 1 − 0.017·Σc", "Garrels & Christ 1965", "dilute to moderate"),
  given("Debye–Hückel slopes", "A = 1.82483e6 √ρ (εT)^−1.5, B = 50.2916 √(ρ/(εT)) per Å", "Malmberg & Maryott 1956, J. Res. NBS 56:1 (ε); Kell 1975, J. Chem. Eng. Data 20:97 (ρ)", "0–100 °C"),
  given("CO2 pressure", "fugacity taken as pressure", "", "pressures up to a few atm"),
  given("organic: oliver-1983", "pK = 0.96 + 0.90·pH − 0.039·pH², one site, 10 µeq per mg C, conditional", "Oliver, Thurman & Malcolm 1983, Geochim. Cosmochim. Acta 47:2031"),
  recalled("organic: hruska-2003", "triprotic, pKa 3.04, 4.51, 6.46; 8.6 µeq sites per mg C, conditional", "Hruška, Köhler, Laudon & Bishop 2003, Environ. Sci. Technol. 37:1726"),
  recalled("organic: driscoll-1994", "triprotic, pKa 2.62, 5.66, 5.94; 0.055 mol sites per mol C, conditional", "Driscoll, Lehtinen & Sullivan 1994, Water Resour. Res. 30:297"),
  recalled("conductivity at 25 °C", "y²·Σ λ·|z|·c over free ions, log y² = −(√I/(1 + √I) − 0.3 I)", "Standard Methods 2510 A; λ: Robinson & Stokes 1959", "dilute"),
  given("air pressure by altitude", "P = (1 − 2.25577e-5·h)^5.2559 atm", "ISO 2533 standard atmosphere", "up to 9000 m"),
  recalled("vapour pressure of water", "0.61121·exp((18.678 − t/234.5)·t/(257.14 + t)) kPa", "Buck 1996", "0–90 °C"),
  given("litre and kilogram", "1 L of water is taken for 1 kg of water", "", "dilute waters"),
  given("buffer intensity", "β = dC_B/dpH, exact at the solution", "Van Slyke 1922, J. Biol. Chem. 52:525; Stumm & Morgan 1996"),
];
