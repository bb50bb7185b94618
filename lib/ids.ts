const ALPHABET = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";

/** `length` random base62 characters from the platform's CSPRNG (5.95 bits each). Works in Node and browsers. */
export function randomBase62(length: number): string {
  let text = "";
  while (text.length < length) {
    for (const byte of crypto.getRandomValues(new Uint8Array(length * 2))) {
      // 248 = 4·62: bytes above it would favour the first letters.
      if (byte < 248 && text.length < length) text += ALPHABET[byte % 62];
    }
  }
  return text;
}

/** A new identifier such as "job_4fK…": the kind, then 119 random bits. */
export function newId(kind: "usr" | "tok" | "set" | "job" | "ord" | "otl" | "req" | "wrk" | "sid"): string {
  return `${kind}_${randomBase62(20)}`;
}
