import { mkdtempSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { loadSecret } from '../../server/secret.ts';
import { passwordProblem, scryptHash } from '../../server/services/accounts/passwords.ts';

const OWNER = { email: 'wanda.pike@railway.example', name: 'Wanda Pike' };

describe('passwordProblem', () => {
  // Source of the kinds that must be refused: NIST SP 800-63B, section 5.1.1.2.
  test.each([
    ['eleven characters', 'kettle-over', 'Use at least 12 characters.'],
    ['129 characters', 'kz'.repeat(64).concat('q'), 'Use at most 128 characters.'],
    ['a common password of 12 characters', 'qwerty123456', 'This is on the list of common passwords; choose another.'],
    ['a common one in capitals', 'QWErtY123456', 'This is on the list of common passwords; choose another.'],
    ['a common word and digits', 'Password20261', 'This is on the list of common passwords; choose another.'],
    ['a common word, digits and signs', 'dragon-2026!!', 'This is on the list of common passwords; choose another.'],
    ['a common word twice', 'monkeymonkey', 'This is on the list of common passwords; choose another.'],
    [
      'one character over and over',
      'zzzzzzzzzzzz',
      'This repeats a few characters or holds only digits and signs; choose another.',
    ],
    [
      'three characters over and over',
      'k7!k7!k7!k7!',
      'This repeats a few characters or holds only digits and signs; choose another.',
    ],
    ['digits only', '580294761138', 'This repeats a few characters or holds only digits and signs; choose another.'],
  ])('refuses %s', (_what, password, sentence) => {
    expect(passwordProblem(password, OWNER)).toBe(sentence);
  });

  test.each([
    ['the e-mail address', 'Wanda.Pike@railway.example'],
    ['its first part and digits', 'wanda.pike2026'],
    ['the name', 'Wanda  Pike 42'],
    ['the name written together', 'wandapike!!!'],
    ['the product', 'Quadrille2026'],
    ['the product in full-width letters', 'Ｑｕａｄｒｉｌｌｅ２０２６'],
  ])('refuses %s', (_what, password) => {
    expect(passwordProblem(password, OWNER)).toMatch(/^This is too close to your name/);
  });

  test.each([
    ['words without digits or signs', 'seven kettles over Bramley'],
    ['a long word of no list', 'zwiebelturmglocke'],
    ['letters of another script', 'тихая станция утром'],
    ['a common word inside of more', 'password of the water tower'],
    ['exactly 12 characters', 'ml0v-Tankard'],
  ])('takes %s', (_what, password) => {
    expect(passwordProblem(password, OWNER)).toBeNull();
  });
});

describe('scryptHash', () => {
  test('verifies the password it hashed, in any Unicode form, and no other', async () => {
    const hash = await scryptHash.hash('Käfer auf der Strecke');
    expect(hash).not.toContain('fer auf');
    expect(await scryptHash.verify({ hash, password: 'Ka\u0308fer auf der Strecke' })).toBe(true);
    expect(await scryptHash.verify({ hash, password: 'Kafer auf der Strecke' })).toBe(false);
  });
});

describe('loadSecret', () => {
  test('makes a secret at the first start, readable by its owner only, and keeps it', () => {
    const folder = mkdtempSync(join(tmpdir(), 'quadrille-secret-'));
    const secret = loadSecret(folder, undefined);
    expect(secret).toMatch(/^[\w-]{43}$/);
    expect(statSync(join(folder, 'secret')).mode & 0o777).toBe(0o600);
    expect(loadSecret(folder, undefined)).toBe(secret);
    expect(readFileSync(join(folder, 'secret'), 'utf8').trim()).toBe(secret);
  });

  test('takes the one of the environment and then writes none', () => {
    const folder = mkdtempSync(join(tmpdir(), 'quadrille-secret-'));
    expect(loadSecret(folder, 'given by the environment, long')).toBe('given by the environment, long');
    expect(() => statSync(join(folder, 'secret'))).toThrow();
  });

  test('refuses a file that holds too little', () => {
    const folder = mkdtempSync(join(tmpdir(), 'quadrille-secret-'));
    writeFileSync(join(folder, 'secret'), 'short');
    expect(() => loadSecret(folder, undefined)).toThrow('holds 5 characters, but a secret needs 32');
  });
});
