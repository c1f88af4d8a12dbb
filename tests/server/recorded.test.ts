import { readdirSync, readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import * as z from 'zod';
import { ROUTES } from '#api';
import { freshWorkflow, recipeText } from './workflow-app.ts';

/**
 * Requests as pages of earlier releases send them. A tab that was open while Quadrille was updated still holds typed text: its saves must be
 * taken. A file here is added when a release changes what a page sends, and none is ever changed.
 */
const FOLDER = 'tests/server/recorded';
const recorded = z.strictObject({
  release: z.string(),
  name: z.enum(['drafts.saveText', 'inputs.keep']),
  body: z.record(z.string(), z.unknown()),
});
const files = readdirSync(FOLDER);

test('both kinds of save are recorded', () => {
  const names = files.map((file) => recorded.parse(JSON.parse(readFileSync(`${FOLDER}/${file}`, 'utf8'))).name);
  expect(new Set(names)).toEqual(new Set(['drafts.saveText', 'inputs.keep']));
});

test.each(files)('a save of an earlier release is taken: %s', async (file) => {
  const { name, body } = recorded.parse(JSON.parse(readFileSync(`${FOLDER}/${file}`, 'utf8')));
  const flow = await freshWorkflow();
  const slug = 'recorded';
  const paths = {
    'drafts.saveText': async () => `/api/drafts/${await flow.start(flow.author)}/text`,
    'inputs.keep': async () => {
      await flow.publish(recipeText(slug, 'GAIN 2'));
      return `/api/recipes/${slug}/inputs/amp`;
    },
  };
  const answer = await flow.send(flow.author, ROUTES[name].method, await paths[name](), body);
  expect([answer.status, answer.body]).toEqual([200, expect.any(Object)]);
});
