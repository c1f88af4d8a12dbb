import { dictionary } from '@zxcvbn-ts/language-common';
import { hashPassword, verifyPassword } from 'better-auth/crypto';

/** What turns a password into what is stored; passed in, so that tests need not wait for scrypt. */
export interface PasswordHash {
  hash(password: string): Promise<string>;
  verify(given: { readonly hash: string; readonly password: string }): Promise<boolean>;
}

/** scrypt with better-auth's parameters, after Unicode normalisation NFKC. */
export const scryptHash: PasswordHash = { hash: hashPassword, verify: verifyPassword };

/** Whose password it will be. */
export interface PasswordOwner {
  readonly email: string;
  readonly name: string;
}

/** Bounds in UTF-16 units; the same as `newPassword` of the contract. Source: NIST SP 800-63B, section 5.1.1.2 (at least 8; ours asks for 12). */
const SHORTEST = 12;
const LONGEST = 128;
const PRODUCT = 'quadrille';

let list: ReadonlySet<string> | undefined;
/** About 57,000 common passwords and words, lower case; unpacked at the first use (20 ms). Source: package @zxcvbn-ts/language-common. */
function commonWords(): ReadonlySet<string> {
  list ??= new Set([...dictionary['passwords-common'], ...dictionary['diceware-common']].map((w) => w.toLowerCase()));
  return list;
}

/**
 * Tells why a password is refused, as a sentence for its field; null when it will do.
 * Refused: shorter than 12 or longer than 128 characters; on the list of common ones, also with case folded and with digits and signs at its
 * end left out; a short text repeated; the person's e-mail address or name, or the product's name, alike. No rules of composition.
 * Source: NIST SP 800-63B, section 5.1.1.2 (what a list of refused passwords should hold).
 */
export function passwordProblem(password: string, owner: PasswordOwner): string | null {
  if (password.length < SHORTEST) return `Use at least ${SHORTEST} characters.`;
  if (password.length > LONGEST) return `Use at most ${LONGEST} characters.`;
  const folded = password.normalize('NFKC').toLowerCase();
  const stem = folded.replace(/[\p{N}\p{P}\p{S}\s]+$/u, '');
  const unit = repeatedUnit(folded);
  if ([folded, stem, unit].some((part) => isOwn(part, owner))) {
    return 'This is too close to your name, your e-mail address or the name of this program; choose another.';
  }
  if (unit.length <= 4 || stem === '')
    return 'This repeats a few characters or holds only digits and signs; choose another.';
  if ([folded, stem, unit].some((part) => commonWords().has(part))) {
    return 'This is on the list of common passwords; choose another.';
  }
  return null;
}

/** The shortest text whose repetition gives the whole: `abc` for `abcabcabc`, the whole itself when nothing repeats. */
function repeatedUnit(text: string): string {
  // A text is a repetition exactly when it is found inside its own double away from the ends.
  return text.slice(0, (text + text).indexOf(text, 1));
}

function isOwn(text: string, { email, name }: PasswordOwner): boolean {
  const address = email.toLowerCase();
  const own = [address, address.split('@')[0] ?? '', name.toLowerCase(), PRODUCT].map(lettersOnly);
  const given = lettersOnly(text);
  return given !== '' && own.includes(given);
}

function lettersOnly(text: string): string {
  return text.replace(/[^\p{L}\p{N}]/gu, '');
}
