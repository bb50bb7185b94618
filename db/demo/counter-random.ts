/**
 * Counter-based random numbers: each is a function of its name alone, so that the demo is the same in every clone, and adding a site or
 * a field changes nothing else.
 */

/** 32-bit FNV-1a over the text, then two rounds of mixing. */
function hash(text: string): number {
  let h = 0x811c9dc5;
  for (let k = 0; k < text.length; k++) h = Math.imul(h ^ text.charCodeAt(k), 0x01000193);
  h = Math.imul(h ^ (h >>> 16), 0x21f0aaad);
  h = Math.imul(h ^ (h >>> 15), 0x735a2d97);
  return (h ^ (h >>> 15)) >>> 0;
}

/** In (0, 1). */
export const uniform = (name: string): number => (hash(name) + 0.5) / 2 ** 32;

/** Standard normal (Box & Muller 1958). */
export const normal = (name: string): number =>
  Math.sqrt(-2 * Math.log(uniform(`${name}/r`))) * Math.cos(2 * Math.PI * uniform(`${name}/a`));
