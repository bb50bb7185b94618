import type { Issue } from "@/lib/errors";

/** Shortest password taken. 15 and more is advised; there are no rules of composition (OWASP ASVS 5.0, 6.2). */
export const PASSWORD_MIN = 8;
/** Longest taken; well above the 64 that must be possible, low enough that hashing stays bounded. */
export const PASSWORD_MAX = 256;

// Common passwords of eight characters and more (shorter ones are refused anyway), compared without case, and with
// trailing digits and marks cut off. Common knowledge of the trade, no source.
const COMMON = new Set(("password passw0rd p@ssword p@ssw0rd passwort letmein welcome qwertyuiop qwertyui qwerty azerty asdfghjk asdfghjkl "
  + "zxcvbnm iloveyou sunshine princess football baseball superman trustno dragon monkey master shadow michael jennifer "
  + "computer internet starwars whatever changeme changeit secret default administrator admin administrador guest "
  + "test testtest user username login abcdefgh abcd abc aaaaaaaa qazwsx qazwsxedc onetwothree tufatufa chemistry laboratory").split(" "));

/** Faults of a new password; none means it is taken. `email` may not be the password itself. */
export function passwordIssues(password: string, email: string): Issue[] {
  const issue = (code: string, message: string, remedy: string): Issue[] => [{ pointer: "/password", code, message, remedy }];
  const length = [...password].length;
  if (length < PASSWORD_MIN) {
    return issue("too-short", `The password has ${length} characters; at least ${PASSWORD_MIN} are needed.`, "15 or more is better; a few words in a row will do.");
  }
  if (length > PASSWORD_MAX) return issue("too-long", `The password has ${length} characters; at most ${PASSWORD_MAX} are taken.`, "Shorten it.");
  const folded = password.toLowerCase().trim();
  const stem = folded.replace(/[\d!?.*#$%&_-]+$/u, "");
  const isRun = "01234567890123456789".includes(folded) || "98765432109876543210".includes(folded) || new Set(folded).size < 3;
  if (COMMON.has(folded) || COMMON.has(stem) || isRun) {
    return issue("common", "This password is among those tried first.", "Choose a few unrelated words.");
  }
  if (folded === email.toLowerCase() || folded === email.toLowerCase().split("@")[0]) {
    return issue("same-as-email", "The password is the e-mail address.", "Choose a few unrelated words.");
  }
  return [];
}
