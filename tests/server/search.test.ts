import { beforeEach, describe, expect, test } from 'vitest';
import { createRecipeSearch, type RecipeSearch } from '../../server/services/search.ts';
import { freshWorkflow, recipeText, type Workflow } from './workflow-app.ts';

let flow: Workflow;
beforeEach(async () => {
  flow = await freshWorkflow();
});

const slugs = async (q: string) => {
  const { body } = await flow.get(flow.reader, `/api/recipes/search?q=${encodeURIComponent(q)}`).expect(200);
  return body.hits.map((hit: { slug: string }) => hit.slug);
};

describe('searching recipes', () => {
  test('finds by title, number, summary, keywords and labels, from the first letters of a word, whatever its case', async () => {
    await flow.publish(recipeText('rail-splitter', 'GAIN 2', 'keywords: virtual ground, half supply\n'));
    await flow.publish(recipeText('bias-tee'));
    for (const q of ['splitter', 'SPLIT', 'Q-001', 'virtual', 'gro', 'V_out'])
      expect([q, await slugs(q)]).toEqual([q, ['rail-splitter']]);
    expect(await slugs('recipe')).toHaveLength(2);
  });

  test('every word must match', async () => {
    await flow.publish(recipeText('rail-splitter', '', 'keywords: virtual ground\n'));
    await flow.publish(recipeText('bias-tee', '', 'keywords: virtual short\n'));
    expect(await slugs('virtual ground')).toEqual(['rail-splitter']);
    expect(await slugs('virtual nothing-of-the-kind')).toEqual([]);
  });

  test('forgives a misspelt word of four letters and more, not a shorter one', async () => {
    await flow.publish(recipeText('rail-splitter'));
    expect(await slugs('spliter')).toEqual(['rail-splitter']);
    expect(await slugs('raal')).toEqual(['rail-splitter']);
    await flow.publish(recipeText('bias-tee'));
    expect(await slugs('tii')).toEqual([]);
  });

  test('passes over words that nearly every recipe holds, unless nothing else was typed', async () => {
    await flow.publish(recipeText('rail-splitter'));
    await flow.publish(recipeText('pulse', '', 'keywords: one-shot\n'));
    expect(await slugs('the splitter within it')).toEqual(['rail-splitter']);
    expect(await slugs('splitter on')).toEqual(['rail-splitter']);
    expect(await slugs('on')).toEqual(['pulse']);
    expect(await slugs('of')).toEqual([]);
  });

  test('takes a number as it stands', async () => {
    await flow.publish(recipeText('rail-splitter', '', 'keywords: "4700"\n'));
    await flow.publish(recipeText('bias-tee', '', 'keywords: "4800"\n'));
    expect(await slugs('4700')).toEqual(['rail-splitter']);
  });

  test('tries misspellings only while there are few exact hits, and puts exact hits first', async () => {
    for (const n of ['a', 'b', 'c', 'd', 'e']) await flow.publish(recipeText(`level-${n}${n}`));
    await flow.publish(recipeText('lever'));
    expect(await slugs('lever')).toEqual(expect.arrayContaining(['lever', 'level-aa']));
    expect((await slugs('lever'))[0]).toBe('lever');
    expect(await slugs('level')).not.toContain('lever');
  });

  test('a title counts more than a summary', async () => {
    await flow.publish(recipeText('mentions').replace('What mentions does.', 'Like an averager.'));
    await flow.publish(recipeText('averager').replace('What averager does.', 'Takes a mean.'));
    expect(await slugs('averager')).toEqual(['averager', 'mentions']);
  });

  test('finds a recipe as soon as it is published, by its new words and no longer by its old ones', async () => {
    expect(await slugs('bias')).toEqual([]);
    await flow.publish(recipeText('bias-tee', '', 'keywords: coupler\n'));
    expect(await slugs('coupler')).toEqual(['bias-tee']);
    await flow.publish(recipeText('bias-tee', '', 'keywords: injector\n'), 'bias-tee');
    expect(await slugs('injector')).toEqual(['bias-tee']);
    expect(await slugs('coupler')).toEqual([]);
  });

  test('says which words of the recipe matched', async () => {
    await flow.publish(recipeText('rail-splitter'));
    const { body } = await flow.get(flow.reader, '/api/recipes/search?q=split').expect(200);
    expect(body.hits).toEqual([{ slug: 'rail-splitter', matched: ['splitter'] }]);
  });

  test('finds nothing for no words, and no draft', async () => {
    await flow.publish(recipeText('rail-splitter'));
    const id = await flow.start(flow.author, recipeText('hidden-one'));
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...(await flow.seen(id)), note: '' }).expect(200);
    expect(await slugs('')).toEqual([]);
    expect(await slugs('hidden')).toEqual([]);
    expect(await slugs('"*+-')).toEqual([]);
  });
});

describe('the index', () => {
  test('is read once from what is there when the server starts, for all that search at once', async () => {
    await flow.publish(recipeText('rail-splitter'));
    const search: RecipeSearch = createRecipeSearch();
    const found = await Promise.all([
      search.build(flow.db),
      search.find(flow.db, 'rail'),
      search.find(flow.db, 'rail'),
    ]);
    expect(found.slice(1).map((hits) => hits?.length)).toEqual([1, 1]);
  });

  test('that could not be read is read again at the next search', async () => {
    await flow.publish(recipeText('rail-splitter'));
    const search = createRecipeSearch();
    const gone = {
      select: () => {
        throw new Error('the database is gone');
      },
    } as unknown as Workflow['db'];
    await expect(search.find(gone, 'rail')).rejects.toThrow('the database is gone');
    expect(await search.find(flow.db, 'rail')).toHaveLength(1);
  });
});
