/**
 * Straight-line code for one system's concentrations and Jacobian, written from its own tables: no index is looked up and nothing is
 * multiplied by zero or one. Every sum runs in the order of the loops in evaluate.ts, so that both give the same bits and an answer does
 * not depend on which of them ran. Made only for systems that many rows use: compiling costs as much as some hundred rows.
 */
import type { System } from "./system";
import type { Workspace } from "./workspace";

export interface GeneratedCode {
  evaluate(ws: Workspace): void;
  /** The logarithmic form of the Jacobian, of order size; and with ln I and ln M bordering it, of order size + 2. */
  assembleLog(ws: Workspace): void;
  assembleBordered(ws: Workspace): void;
}

/** Solves of a system before code is made for it. */
export const SOLVES_BEFORE_CODE = 400;

const times = (factor: number, what: string): string => (factor === 1 ? what : factor === -1 ? `-${what}` : `${factor}*${what}`);
const plus = (factor: number, what: string): string => (factor === 1 ? `+${what}` : factor === -1 ? `-${what}` : factor < 0 ? `-${-factor}*${what}` : `+${factor}*${what}`);

/** @returns null for systems with a pH-dependent constant, whose exponents change from step to step. */
export function generateCode(system: System): GeneratedCode | null {
  if (system.varying >= 0) return null;
  // Numbers of the tables alone enter the text: nothing of a document can.
  const evaluate = new Function("ws", evaluateText(system)) as GeneratedCode["evaluate"];
  const assembleLog = new Function("ws", assembleText(system, false)) as GeneratedCode["assembleLog"];
  const assembleBordered = new Function("ws", assembleText(system, true)) as GeneratedCode["assembleBordered"];
  return { evaluate, assembleLog, assembleBordered };
}

function evaluateText(system: System): string {
  const { size, nStart, nColumn, nValue, wStart, wRow, wValue, gammaClass, water, charge } = system;
  const lines = ["const {y,base,cs,lnGamma,plus,minus,balanceTotal,lnWater}=ws;let e,c,I=0,M=0;"];
  for (let b = 0; b < size; b++) lines.push(`const y${b}=y[${b}],t${b}=balanceTotal[${b}];let p${b}=t${b}<0?-t${b}:0,m${b}=t${b}>0?t${b}:0;`);
  for (const k of new Set(gammaClass)) lines.push(`const g${k}=lnGamma[${k}];`);
  for (let s = 0; s < gammaClass.length; s++) {
    lines.push(`e=base[${s}]${water[s] === 0 ? "" : plus(water[s], "lnWater")}-g${gammaClass[s]};`);
    for (let q = nStart[s]; q < nStart[s + 1]; q++) lines.push(`e=e${plus(nValue[q], `y${nColumn[q]}`)};`);
    lines.push(`c=Math.exp(e);cs[${s}]=c;`);
    for (let q = wStart[s]; q < wStart[s + 1]; q++) lines.push(wValue[q] > 0 ? `p${wRow[q]}+=${times(wValue[q], "c")};` : `m${wRow[q]}+=${times(-wValue[q], "c")};`);
    if (charge[s] !== 0) lines.push(`I+=${times(charge[s] * charge[s], "c")};`);
    lines.push("M+=c;");
  }
  for (let a = 0; a < size; a++) lines.push(`plus[${a}]=p${a};minus[${a}]=m${a};`);
  lines.push("ws.sumI=0.5*I;ws.sumM=M;");
  return lines.join("");
}

function assembleText(system: System, isBordered: boolean): string {
  const { size, nStart, nColumn, nValue, wStart, wRow, wValue, gammaClass, water, charge } = system;
  const ld = isBordered ? size + 2 : size;
  const rowI = size * ld;
  const rowM = rowI + ld;
  const lines = [`const {cs,matrix,plus,minus,gammaSlope,waterSlope}=ws;matrix.fill(0,0,${ld * ld});let c,f,fI,fM,sM;const perI=0.5/ws.sumI,perM=1/ws.sumM;`];
  for (let a = 0; a < size; a++) lines.push(`const ip${a}=1/plus[${a}],im${a}=1/minus[${a}];`);
  if (isBordered) for (const k of new Set(gammaClass)) lines.push(`const s${k}=-gammaSlope[${k}];`);
  for (let s = 0; s < gammaClass.length; s++) {
    const slope = `s${gammaClass[s]}`;
    const hasWater = isBordered && water[s] !== 0;
    lines.push(`c=cs[${s}];`);
    if (hasWater) lines.push(`sM=${times(water[s], "waterSlope")};`);
    for (let p = wStart[s]; p < wStart[s + 1]; p++) {
      const a = wRow[p];
      lines.push(`f=${times(wValue[p], "c")}*i${wValue[p] > 0 ? "p" : "m"}${a};`);
      for (let q = nStart[s]; q < nStart[s + 1]; q++) lines.push(`matrix[${a * ld + nColumn[q]}]+=${times(nValue[q], "f")};`);
      if (isBordered) lines.push(`matrix[${a * ld + size}]+=f*${slope};`);
      if (hasWater) lines.push(`matrix[${a * ld + size + 1}]+=f*sM;`);
    }
    if (!isBordered) continue;
    const z = charge[s];
    lines.push("fM=c*perM;");
    if (z !== 0) lines.push(`fI=${times(z * z, "c")}*perI;`);
    for (let q = nStart[s]; q < nStart[s + 1]; q++) {
      if (z !== 0) lines.push(`matrix[${rowI + nColumn[q]}]+=${times(nValue[q], "fI")};`);
      lines.push(`matrix[${rowM + nColumn[q]}]+=${times(nValue[q], "fM")};`);
    }
    if (z !== 0) lines.push(`matrix[${rowI + size}]+=fI*${slope};`);
    if (z !== 0 && hasWater) lines.push(`matrix[${rowI + size + 1}]+=fI*sM;`);
    lines.push(`matrix[${rowM + size}]+=fM*${slope};`);
    if (hasWater) lines.push(`matrix[${rowM + size + 1}]+=fM*sM;`);
  }
  if (isBordered) lines.push(`matrix[${rowI + size}]-=1;matrix[${rowM + size + 1}]-=1;`);
  return lines.join("");
}
