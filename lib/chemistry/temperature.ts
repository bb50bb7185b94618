/** What depends on temperature and pressure alone. */
import type { LogKOverT } from "@/lib/chemistry/data/types";

const GAS_CONSTANT = 8.314462618e-3; // kJ/mol/K, CODATA 2018
const LN10 = Math.LN10;

/** log10 K at t °C: the published analytic form, or van 't Hoff from 25 °C (chemistry.md sections 1 and 8). */
export function logKAt(form: LogKOverT, celsius: number): number {
  const kelvin = celsius + 273.15;
  if (form.form === "analytic") {
    return form.a + form.bT * kelvin + form.cOverT / kelvin + form.dLog10T * Math.log10(kelvin) + form.eOverT2 / (kelvin * kelvin);
  }
  return form.logK25 - form.reactionEnthalpy / (LN10 * GAS_CONSTANT) * (1 / kelvin - 1 / 298.15);
}

/** Density of water, g/cm³ (Kell 1975, J. Chem. Eng. Data 20:97). */
export function waterDensity(t: number): number {
  return (999.83952 + t * (16.945176 + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 - t * 280.54253e-12)))))
    / (1 + 16.87985e-3 * t) / 1000;
}

/** Dielectric constant of water (Malmberg & Maryott 1956, J. Res. NBS 56:1). */
export function dielectricConstant(t: number): number {
  return 87.74 + t * (-0.40008 + t * (9.398e-4 - t * 1.41e-6));
}

/** Debye–Hückel A, (kg/mol)^½ in log10 units. */
export function debyeSlope(celsius: number): number {
  return 1.82483e6 * Math.sqrt(waterDensity(celsius)) * (dielectricConstant(celsius) * (celsius + 273.15)) ** -1.5;
}

/** Debye–Hückel B, 1/Å. */
export function debyeSizeFactor(celsius: number): number {
  return 50.2916 * Math.sqrt(waterDensity(celsius) / (dielectricConstant(celsius) * (celsius + 273.15)));
}

/** Vapour pressure of water, atm (Buck 1996, from memory). */
export function vapourPressure(t: number): number {
  return 0.61121 * Math.exp((18.678 - t / 234.5) * t / (257.14 + t)) / 101.325;
}

/** Pressure of the standard atmosphere at a height in metres, atm (ISO 2533). */
export function standardPressure(altitude: number): number {
  return (1 - 2.25577e-5 * altitude) ** 5.2559;
}

/**
 * pCO2 in atm of a dry mole fraction: of 1 atm, or of the moist air at a stated altitude (m) or pressure (atm); pressure wins.
 */
export function pressureOfFraction(fraction: number, celsius: number, altitude: number | null, pressureAtm: number | null): number {
  if (pressureAtm === null && altitude === null) return fraction;
  const total = pressureAtm ?? standardPressure(altitude ?? 0);
  return fraction * (total - vapourPressure(celsius));
}

/** d log10 K/dT, 1/K. */
export function logKSlope(form: LogKOverT, celsius: number): number {
  const kelvin = celsius + 273.15;
  if (form.form === "analytic") {
    return form.bT + (-form.cOverT / kelvin + form.dLog10T / LN10 - 2 * form.eOverT2 / (kelvin * kelvin)) / kelvin;
  }
  return form.reactionEnthalpy / (LN10 * GAS_CONSTANT * kelvin * kelvin);
}

/** d ln ρ/dT and d ln(εT)/dT, 1/K: all that A and B vary by. */
function waterSlopes(t: number): { density: number; polarity: number } {
  const top = 999.83952 + t * (16.945176 + t * (-7.9870401e-3 + t * (-46.170461e-6 + t * (105.56302e-9 - t * 280.54253e-12))));
  const topSlope = 16.945176 + t * (2 * -7.9870401e-3 + t * (3 * -46.170461e-6 + t * (4 * 105.56302e-9 - t * 5 * 280.54253e-12)));
  const epsilonSlope = -0.40008 + t * (2 * 9.398e-4 - t * 3 * 1.41e-6);
  return { density: topSlope / top - 16.87985e-3 / (1 + 16.87985e-3 * t), polarity: epsilonSlope / dielectricConstant(t) + 1 / (t + 273.15) };
}

/** dA/dT and dB/dT. */
export function debyeTemperatureSlopes(celsius: number): { a: number; b: number } {
  const { density, polarity } = waterSlopes(celsius);
  return { a: debyeSlope(celsius) * (0.5 * density - 1.5 * polarity), b: debyeSizeFactor(celsius) * 0.5 * (density - polarity) };
}

/** d pCO2 of a dry mole fraction by temperature, altitude and pressure, atm per °C, m and atm. */
export function fractionSlopes(fraction: number, t: number, altitude: number | null, pressureAtm: number | null): { temperature: number; altitude: number; pressure: number } {
  if (pressureAtm === null && altitude === null) return { temperature: 0, altitude: 0, pressure: 0 };
  const below = 257.14 + t;
  const exponentSlope = ((18.678 - 2 * t / 234.5) * below - (18.678 - t / 234.5) * t) / (below * below);
  const byHeight = pressureAtm === null ? -2.25577e-5 * 5.2559 * (1 - 2.25577e-5 * (altitude ?? 0)) ** 4.2559 : 0;
  return { temperature: -fraction * vapourPressure(t) * exponentSlope, altitude: fraction * byHeight, pressure: pressureAtm === null ? 0 : fraction };
}
