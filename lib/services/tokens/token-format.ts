/**
 * Form of an API token: `tufa_`, 30 base62 characters (178 random bits), 6 base62 characters of their CRC-32.
 * The checksum lets a mistyped token be refused without a query, and lets scanners for leaked secrets tell a real token
 * from look-alikes.
 */
import { randomBase62 } from "@/lib/ids";

const PREFIX = "tufa_";
const SECRET_LENGTH = 30;
const CHECK_LENGTH = 6;
const ALPHABET = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";
const SHAPE = /^tufa_[0-9A-Za-z]{36}$/;

/** Finds tokens inside longer text, for redaction. */
export const TOKEN_PATTERN = /tufa_[0-9A-Za-z]{36}/g;

/** CRC-32 (IEEE 802.3, reflected, polynomial 0xEDB88320) of ASCII text. */
export function crc32(text: string): number {
  let crc = 0xffffffff;
  for (let i = 0; i < text.length; i++) {
    crc ^= text.charCodeAt(i);
    for (let bit = 0; bit < 8; bit++) crc = (crc >>> 1) ^ (crc & 1 ? 0xedb88320 : 0);
  }
  return (crc ^ 0xffffffff) >>> 0;
}

function checksumOf(secret: string): string {
  let rest = crc32(secret);
  let text = "";
  for (let i = 0; i < CHECK_LENGTH; i++) {
    text = ALPHABET[rest % 62] + text;
    rest = Math.floor(rest / 62);
  }
  return text;
}

/** A new token. Show it once; store `tokenHash`, `tokenPrefix` and `tokenLastFour` only. */
export function newToken(): string {
  const secret = randomBase62(SECRET_LENGTH);
  return PREFIX + secret + checksumOf(secret);
}

/** Whether the text has the form of a token and its checksum fits. */
export function isTokenShaped(text: string): boolean {
  if (!SHAPE.test(text)) return false;
  const secret = text.slice(PREFIX.length, PREFIX.length + SECRET_LENGTH);
  return checksumOf(secret) === text.slice(PREFIX.length + SECRET_LENGTH);
}

/** The part that lists may show: `tufa_` and six characters, which leaves 142 secret bits. */
export const tokenPrefix = (token: string): string => token.slice(0, PREFIX.length + 6);
export const tokenLastFour = (token: string): string => token.slice(-4);
