import { afterAll, describe, expect, test } from 'vitest';
import { createCompilePool } from '../../server/compile-pool.ts';

const reported: Error[] = [];
const pool = createCompilePool(new URL('./threads/echo-thread.ts', import.meta.url), (error) => reported.push(error));
afterAll(() => pool.close());

const titleOf = async (text: string) => (await pool.compile(text, {})).checks[0]?.title;

describe('the compile pool', () => {
  test('compiles in a thread, where the doors of shared/ open', async () => {
    expect(await titleOf('a recipe')).toBe('a recipe');
  });

  test('gives the same answer for the same text and facts without compiling again, and another for other facts', async () => {
    const [first, again] = await Promise.all([pool.compile('kept', {}), pool.compile('kept', {})]);
    expect(again).toBe(first);
    expect(await pool.compile('kept', { hazardVolts: 30 })).not.toBe(first);
  });

  test('ends a thread that hangs; other texts go on meanwhile and afterwards', async () => {
    const hung = pool.compile('hang', {});
    expect(await titleOf('meanwhile')).toBe('meanwhile');
    const { document, diagnostics } = await hung;
    expect(document).toBeNull();
    expect(diagnostics).toMatchObject([
      { code: 'too-slow', message: 'The text takes longer than 4 s to compile, but it needs to take less.' },
    ]);
    expect(await Promise.all(['one', 'two', 'three'].map(titleOf))).toEqual(['one', 'two', 'three']);
  });

  test('survives a text that fills the memory', async () => {
    expect((await pool.compile('fill', {})).diagnostics[0]?.code).toBe('too-slow');
    expect(await titleOf('after')).toBe('after');
    // Ended for its time, such a thread may still run out of memory on its way out.
    for (const error of reported) expect(error).toMatchObject({ code: 'ERR_WORKER_OUT_OF_MEMORY' });
  });

  test('passes a fault of ours on, and keeps nothing of it', async () => {
    await expect(pool.compile('throw', {})).rejects.toThrow('a fault of ours');
    await expect(pool.compile('throw', {})).rejects.toThrow('a fault of ours');
    expect(await titleOf('after a fault')).toBe('after a fault');
  });
});
