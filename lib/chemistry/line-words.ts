/** A dictated line cut into words: names, numbers and units apart though written together, each with its place. */
import { findName } from "@/lib/chemistry/line-names";

export interface Word { text: string; start: number; end: number }

const NUMBER = /^[<≤]?[+\-−]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+\-−]?\d+)?$/i;
const GLUED_UNIT = /^([<≤]?[+\-−]?(?:\d+[.,]?\d*|[.,]\d+)(?:e[+\-−]?\d+(?![a-z]))?)([a-zµμ°%].*)$/i;
const GLUED_SIGN = /^([^=:<≤]+)([=:]|(?=[<≤]))(.*)$/;
const GLUED_NUMBER = /^(\D+)(\d.*)$/;
const SEPARATOR = /^[,;\n]$/;

export const isBreak = (word: Word): boolean => SEPARATOR.test(word.text);
export const isNumber = (word: Word | undefined): boolean => word !== undefined && NUMBER.test(word.text);

/** Words and breaks (commas, semicolons, line ends) in order. */
export function lineWords(line: string): Word[] {
  const found: Word[] = [];
  for (const match of line.matchAll(/[;\n]|[^\s;]+/g)) {
    for (const piece of splitCommas(match[0], match.index)) found.push(...(isBreak(piece) ? [piece] : splitGlued(piece)));
  }
  return joinLimits(found);
}

/** A comma behind a plain run of digits and before a digit is a decimal sign; any other one is a break. */
function splitCommas(text: string, start: number): Word[] {
  const found: Word[] = [];
  let from = 0;
  const take = (to: number): void => { if (to > from) found.push({ text: text.slice(from, to), start: start + from, end: start + to }); };
  for (let at = text.indexOf(","); at >= 0; at = text.indexOf(",", at + 1)) {
    if (/\d/.test(text.charAt(at + 1)) && /(?:^|[=:<≤+\-−])\d*$/.test(text.slice(Math.max(from, at - 20), at))) continue;
    take(at);
    found.push({ text: ",", start: start + at, end: start + at + 1 });
    from = at + 1;
  }
  take(text.length);
  return found;
}

const cut = (word: Word, from: number, to: number): Word => ({ text: word.text.slice(from, to), start: word.start + from, end: word.start + to });

/** "Ca=62mg/L" as "Ca", "62", "mg/L"; "pH7.9" as "pH", "7.9"; "F<0.05" as "F", "<0.05". */
function splitGlued(word: Word): Word[] {
  const { text } = word;
  if (isNumber(word) || text.length > 100) return [word];
  const unit = GLUED_UNIT.exec(text);
  if (unit) return [cut(word, 0, unit[1].length), cut(word, unit[1].length, text.length)];
  const sign = GLUED_SIGN.exec(text);
  if (sign) {
    const value = cut(word, sign[1].length + sign[2].length, text.length);
    return [cut(word, 0, sign[1].length), ...(value.text ? splitGlued(value) : [])];
  }
  const number = GLUED_NUMBER.exec(text);
  if (number && !findName(text) && findName(number[1])) return [cut(word, 0, number[1].length), ...splitGlued(cut(word, number[1].length, text.length))];
  return [word];
}

/** "< 0.05" as one number. */
function joinLimits(all: readonly Word[]): Word[] {
  const found: Word[] = [];
  for (const word of all) {
    const last = found[found.length - 1];
    if (last && /^[<≤]$/.test(last.text) && isNumber(word)) found[found.length - 1] = { text: last.text + word.text, start: last.start, end: word.end };
    else found.push(word);
  }
  return found;
}
