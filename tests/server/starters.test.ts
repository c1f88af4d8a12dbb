import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { auditEvent, recipe, recipeVersion } from '../../server/database/schema.ts';
import { loadStarters } from '../../server/services/starters.ts';
import { fakeCompile, freshWorkflow, hashText, recipeText, type Workflow } from './workflow-app.ts';

let flow: Workflow;
let folder: string;
beforeEach(async () => {
  flow = await freshWorkflow();
  folder = mkdtempSync(join(tmpdir(), 'quadrille-starters-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const write = (file: string, text: string) => writeFileSync(join(folder, file), text);
const load = () =>
  loadStarters({
    db: flow.db,
    now: flow.frame.clock(),
    ids: flow.frame.ids,
    compile: fakeCompile,
    release: '0.1.0',
    folder,
  });

describe('loading the starter recipes', () => {
  test('puts each into an empty collection as version 1, supplied and signed by nobody', async () => {
    write('one.mdx', recipeText('one'));
    write('two.mdx', recipeText('two', 'Words.', 'number: TW-2\n'));
    write('notes.txt', 'not a recipe');
    expect(await load()).toBe(2);
    const { body } = await flow.get(flow.reader, '/api/recipes/one').expect(200);
    expect(body).toMatchObject({
      recipe: { slug: 'one', number: 'Q-001', origin: 'supplied', owners: [], reviewDue: null, state: 'published' },
      version: { version: 1, supplied: '0.1.0', signedBy: null, writtenBy: [] },
      textHash: hashText(recipeText('one')),
    });
    expect((await flow.get(flow.reader, '/api/recipes')).body.recipes[1].number).toBe('TW-2');
    expect(await flow.db.select().from(auditEvent)).toMatchObject([
      { act: 'load starter recipes', about: '2 recipes', userId: null },
    ]);
  });

  test('leaves a collection alone that holds anything, even a first draft', async () => {
    write('one.mdx', recipeText('one'));
    await flow.start(flow.author);
    expect(await load()).toBe(0);
    expect(await flow.db.select().from(recipeVersion)).toEqual([]);
  });

  test('a second start loads nothing more', async () => {
    write('one.mdx', recipeText('one'));
    expect(await load()).toBe(1);
    expect(await load()).toBe(0);
  });

  test.each([
    ['an error', 'PROBLEM', 'bad.mdx cannot be loaded: line 1, column 1: A problem.'],
    ['a failing check', 'FAILS', 'bad.mdx cannot be loaded: An example'],
  ])('stops with the name of the file and its place at %s, and loads none', async (_what, body, message) => {
    write('a-good.mdx', recipeText('good'));
    write('bad.mdx', recipeText('bad', body));
    await expect(load()).rejects.toThrow(message);
    expect(await flow.db.select().from(recipe)).toEqual([]);
  });

  test('two files with one slug stop it, and none is loaded', async () => {
    write('a.mdx', recipeText('one'));
    write('b.mdx', recipeText('one'));
    await expect(load()).rejects.toThrow('b.mdx cannot be loaded: The slug one belongs to another recipe.');
    expect(await flow.db.select().from(recipe)).toEqual([]);
  });
});
