import { mkdtempSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { compileRecipe } from '#recipe';
import { auditEvent, recipe, recipeVersion, team } from '../../server/database/schema.ts';
import type { Context } from '../../server/http/context.ts';
import { loadStarters } from '../../server/services/starters.ts';
import { fakeCompile, freshWorkflow, hashText, recipeText, TICKS, type Workflow } from './workflow-app.ts';

let flow: Workflow;
let folder: string;
beforeEach(async () => {
  flow = await freshWorkflow();
  folder = mkdtempSync(join(tmpdir(), 'quadrille-starters-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const write = (file: string, text: string) => writeFileSync(join(folder, file), text);
const load = (compile: Context['compile'] = fakeCompile, from = folder) =>
  loadStarters({
    db: flow.db,
    now: flow.frame.clock(),
    ids: flow.frame.ids,
    compile,
    release: '0.1.0',
    folder: from,
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

describe('the recipes that come with Quadrille', () => {
  const CONTENT = 'content';
  const realCompile: Context['compile'] = async (text, facts) => compileRecipe(text, facts);

  test('compile without an error, pass their checks, and load with their topics and purposes', async () => {
    const files = readdirSync(CONTENT).filter((file) => file.endsWith('.mdx'));
    expect(await load(realCompile, CONTENT)).toBe(files.length);
    const { body } = await flow.get(flow.reader, '/api/recipes').expect(200);
    expect(body.recipes).toHaveLength(files.length);
    const [settings] = await flow.db.select().from(team);
    for (const row of body.recipes) {
      expect(settings?.topics).toEqual(expect.arrayContaining(row.topics));
      expect(settings?.purposes).toContain(row.purpose);
    }
  });

  test('are changed, reviewed and signed off by the real compiler, number by number', async () => {
    flow = await freshWorkflow(realCompile);
    await load(realCompile, CONTENT);
    const slug = 'rail-splitter';
    const id = await flow.start(flow.author, undefined, slug);
    const { body: page } = await flow.get(flow.author, `/api/drafts/${id}`).expect(200);
    const text = `${page.text}\nOne more sentence.\n`;
    await flow.save(flow.author, id, 0, text).expect(200);
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    const { body: review } = await flow.get(flow.editor, `/api/reviews/${id}`).expect(200);
    expect(review).toMatchObject({ base: { version: 1 }, numbers: [], ticks: TICKS });
    expect(review.checks.length).toBeGreaterThan(0);
    await flow
      .post(flow.editor, `/api/reviews/${id}/sign-off`, { ...(await flow.seen(id)), ticks: TICKS, note: '' })
      .expect(200);
    const { body } = await flow.get(flow.reader, `/api/recipes/${slug}`).expect(200);
    expect(body).toMatchObject({ recipe: { origin: 'team', version: 2 }, version: { signedBy: flow.editor.name } });
  });
});
