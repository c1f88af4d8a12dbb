import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';

const folder = mkdtempSync(join(tmpdir(), 'quadrille-recipe-'));
afterAll(() => rmSync(folder, { recursive: true }));

function page(slug: string, formula: string, words = ''): string {
  return `---
title: A page
slug: ${slug}
summary: For a test.
hazards: [none]
---

<Calculator id="amp" title="Numbers">
  <Given name="U" label="In" quantity="voltage" value="±2 V" max="20 V" tolerance="1 %" />
  <Given name="R" label="Load" quantity="resistance" value="4k7" />
  <Result name="I" label="Current" formula="${formula}" unit="mA" />
  <Result name="g" label="Ratio" formula="1 V / (U - U)" />
  <Limit name="top" of="I" to="1 mA" says="x" />
</Calculator>

${words}
`;
}

beforeAll(() => {
  writeFileSync(join(folder, 'good.mdx'), page('good-page', 'U / R', '<Recipe slug="other-page" />'));
  writeFileSync(join(folder, 'other.mdx'), page('other-page', 'U / R', '<Recipe slug="elsewhere" />'));
  writeFileSync(join(folder, 'bad.mdx'), page('bad-page', 'U + R'));
  writeFileSync(join(folder, 'latin.mdx'), Buffer.from([0x2d, 0x2d, 0xb5, 0x0a]));
});

const at = (name: string) => join(folder, name);

/** What `npm run --silent recipe --` runs; names of files are those of the folder. */
function recipe(...args: readonly string[]) {
  const { status, stdout, stderr } = spawnSync(
    process.execPath,
    ['--import', 'tsx', 'server/commands/recipe.ts', ...args.map((arg) => (arg.endsWith('.mdx') ? at(arg) : arg))],
    { cwd: new URL('..', import.meta.url).pathname, encoding: 'utf8' },
  );
  return { status, stdout, stderr };
}

describe('recipe check', { timeout: 120_000 }, () => {
  test('gives JSON for each file; files that are given together may link each other', () => {
    const { status, stdout, stderr } = recipe('check', 'good.mdx', 'other.mdx', '--json');
    expect([status, stderr]).toEqual([0, '']);
    const [good, other] = JSON.parse(stdout);
    expect(good).toMatchObject({ file: at('good.mdx'), ok: true, diagnostics: [] });
    expect(good.checks.map(({ kind, passed }: { kind: string; passed: boolean }) => [kind, passed])).toEqual([
      ['dimensions', true],
      ['caution', true],
    ]);
    expect(other.diagnostics).toMatchObject([
      { severity: 'warning', code: 'not-checked-here', start: { line: 16, column: 15 } },
    ]);
  });

  test('exits with 1 and the place of each error', () => {
    const { status, stdout } = recipe('check', 'bad.mdx');
    expect(status).toBe(1);
    expect(stdout).toContain('bad.mdx:11:49 error dimension-mismatch: ');
  });

  test.each([
    ['no file', ['check']],
    ['a file that does not exist', ['check', 'nothing.mdx']],
    ['a file that is not UTF-8', ['check', 'latin.mdx']],
    ['an option that does not exist', ['check', 'good.mdx', '--all']],
    ['a command that does not exist', ['draw', 'good.mdx']],
    ['netlist, which comes later', ['netlist', 'good.mdx']],
  ])('exits with 2 and says nothing on standard output for %s', (_, args) => {
    const { status, stdout, stderr } = recipe(...args);
    expect([status, stdout]).toEqual([2, '']);
    expect(stderr).not.toBe('');
  });
});

describe('recipe run', { timeout: 120_000 }, () => {
  test('gives inputs, results and limits as JSON, in SI units', () => {
    const { status, stdout, stderr } = recipe('run', 'good.mdx', '--json', '--samples', '100', '--seed', '7');
    expect([status, stderr]).toEqual([0, '']);
    const answer = JSON.parse(stdout);
    expect(Object.keys(answer)).toEqual(['slug', 'calculators']);
    const { inputs, results, limits } = answer.calculators.amp;
    expect(inputs.U).toMatchObject({ si: 0, low: -2, high: 2 });
    expect(inputs.R).toMatchObject({ si: 4700 });
    expect(results.I).toMatchObject({ si: 0, unit: 'A' });
    // ±2 V across 4.7 kΩ: own arithmetic.
    expect([results.I.low, results.I.high].map((value: number) => value.toExponential(6))).toEqual([
      '-4.255319e-4',
      '4.255319e-4',
    ]);
    expect(results.g).toMatchObject({ si: null, problem: { code: 'unbounded', sign: 1 } });
    expect(limits).toMatchObject([
      { name: 'top', level: 'stop', state: 'within', held: true, held_nominal: true, from: null, to: 0.001 },
    ]);
  });

  test('takes other inputs, in any form that a field takes, and exits with 0 when a limit is exceeded', () => {
    const { status, stdout } = recipe('run', 'good.mdx', '--set', 'amp.U=5 V', '--set', 'amp.R=1k', '--json');
    expect(status).toBe(0);
    const { inputs, limits } = JSON.parse(stdout).calculators.amp;
    expect([inputs.U.si, inputs.R.si]).toEqual([5, 1000]);
    expect(limits[0]).toMatchObject({ state: 'exceeded', held: false, value: 0.005 });
  });

  test('writes a table for people', () => {
    const { status, stdout } = recipe('run', 'good.mdx', '--set', 'amp.U=4.7 V');
    expect(status).toBe(0);
    expect(stdout).toContain('Current I = 1.000\u2009mA');
  });

  test('exits with 1 for a recipe with errors: diagnostics on standard error, and as JSON', () => {
    const { status, stdout, stderr } = recipe('run', 'bad.mdx', '--json');
    expect(status).toBe(1);
    expect(stderr).toContain('dimension-mismatch');
    expect(JSON.parse(stdout)).toMatchObject({
      file: at('bad.mdx'),
      ok: false,
      diagnostics: [{ code: 'dimension-mismatch' }],
    });
  });

  test.each([
    ['an unknown calculator', 'x.U=1 V'],
    ['an unknown name', 'amp.Z=1 V'],
    ['a result', 'amp.I=1 A'],
    ['a value of the wrong unit', 'amp.U=1 A'],
    ['a value outside of its limits', 'amp.U=21 V'],
    ['no value', 'amp.U'],
  ])('exits with 2 for %s', (_, setting) => {
    const { status, stdout, stderr } = recipe('run', 'good.mdx', '--set', setting);
    expect([status, stdout]).toEqual([2, '']);
    expect(stderr).not.toBe('');
  });
});
