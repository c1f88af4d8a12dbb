import { randomBytes } from 'node:crypto';
import { eq } from 'drizzle-orm';
import type { Role } from '#api';
import type { CalculatorModel } from '#calculator';
import type { Compiled, RecipeDocument } from '#recipe';
import { team, user } from '../../server/database/schema.ts';
import type { Context, Person } from '../../server/http/context.ts';
import { createServices } from '../../server/routes.ts';
import { hashText } from '../../server/services/recipe-text.ts';
import { createRecipeSearch } from '../../server/services/search.ts';
import { modelOf } from '../calculator-model.ts';
import { type FreshApp, freshApp, START } from './fresh-app.ts';

export const TICKS = ['I followed the derivation of each formula', 'I looked at the hazards and their cautions'];

export function sorted(names: readonly string[]): readonly string[] {
  return [...names].sort((a, b) => a.localeCompare(b, 'en'));
}

export function statuses(answers: readonly { readonly status: number }[]): readonly number[] {
  return answers.map((answer) => answer.status).sort((a, b) => a - b);
}

/** A new id as a client makes it. */
export const clientId = () => randomBytes(16).toString('base64url');

/** A text with front matter as the compiler wants it. */
export function recipeText(slug: string, body = 'Words.', more = ''): string {
  return `---\ntitle: Recipe of ${slug}\nslug: ${slug}\nsummary: What ${slug} does.\nhazards: [none]\n${more}---\n\n${body}\n`;
}

/**
 * Compiles without a compiler: the front matter becomes the document's, `PROBLEM` in the text an error and `FAILS` a failing check, so that a
 * test of the workflow says itself which check fails. `GAIN 2` makes a calculator `amp` with V_out = 2 · V_in and a limit of 10 V.
 */
export const fakeCompile: Context['compile'] = async (text): Promise<Compiled> => {
  const key = (name: string) => new RegExp(`^${name}: (.*)$`, 'm').exec(text)?.[1];
  const check = { kind: 'example', title: 'An example', passed: !text.includes('FAILS'), detail: '' } as const;
  const number = key('number');
  const gain = /GAIN (\S+)/.exec(text)?.[1];
  const document: RecipeDocument = {
    schema: 1,
    compiler: 1,
    front: {
      title: key('title') ?? '',
      summary: key('summary') ?? '',
      slug: key('slug') ?? '',
      hazards: [],
      ...(number === undefined ? {} : { number }),
      topics: [],
      keywords: key('keywords')?.split(', ') ?? [],
      reviewMonths: Number(key('review_months') ?? 24),
      sources: {},
    },
    body: [],
    calculators: gain === undefined ? [] : [amplifier(gain)],
    drawings: [],
    headings: [],
    uses: [],
    checks: [check],
    proof: { formulas: 0, provenAgainstDrawing: 0, examples: 1, examplesPassed: 1, examplesFromOutside: 0 },
  };
  const broken = text.includes('PROBLEM') || document.front.slug === '';
  const point = { line: 1, column: 1, offset: 0 };
  const problem = { severity: 'error', code: 'made-up', message: 'A problem.', start: point, end: point } as const;
  return {
    document: broken ? null : document,
    preview: document,
    diagnostics: broken ? [problem] : [],
    checks: [check],
  };
};

function amplifier(gain: string): CalculatorModel {
  return modelOf({
    id: 'amp',
    givens: { V_in: ['voltage', '1 V'] },
    results: { V_out: `${gain} * V_in` },
    limits: { output: { of: 'V_out', to: '10 V' } },
    examples: [{ sets: { V_in: '2 V' }, numbers: { V_out: `${2 * Number(gain)} V` } }],
  });
}

export interface Workflow extends FreshApp {
  readonly author: Person;
  readonly coauthor: Person;
  readonly outsider: Person;
  readonly editor: Person;
  readonly editor2: Person;
  readonly reader: Person;
  readonly admin: Person;
  start(who: Person, text?: string, changes?: string): Promise<string>;
  save(who: Person, id: string, baseRevision: number, text: string, saveId?: string): ReturnType<FreshApp['send']>;
  /** What the draft says now, as an act on it needs to name it. */
  seen(id: string): Promise<{ requestId: string; revision: number; hash: string }>;
  post(who: Person, path: string, body?: object): ReturnType<FreshApp['send']>;
  get(who: Person, path: string): ReturnType<FreshApp['send']>;
  /** From nothing to a published version, written by one person and signed by another. */
  publish(
    text: string,
    changes?: string,
    writer?: Person,
    signer?: Person,
  ): Promise<{ slug: string; version: number; id: string }>;
}

/** The application with more people than one per role. */
export async function freshWorkflow(compile: Context['compile'] = fakeCompile): Promise<Workflow> {
  const app = await freshApp({ services: createServices(createRecipeSearch()), compile });
  const extra = {
    coauthor: await addPerson(app, 'coauthor', 'Cole Wright', 'author'),
    outsider: await addPerson(app, 'outsider', 'Orla Finch', 'author'),
    editor2: await addPerson(app, 'editor-2', 'Esme Brandt', 'editor'),
  };
  const { author, editor, reader, admin } = app.people;
  const post: Workflow['post'] = (who, path, body = {}) =>
    app.send(who, 'POST', path, { requestId: clientId(), ...body });
  const get: Workflow['get'] = (who, path) => app.send(who, 'GET', path);
  const seen: Workflow['seen'] = async (id) => {
    const { body } = await get(admin, `/api/drafts/${id}`).expect(200);
    return { requestId: clientId(), revision: body.draft.revision, hash: body.hash };
  };
  const start: Workflow['start'] = async (who, text, changes) => {
    const { body } = await post(who, '/api/drafts', {
      ...(text === undefined ? {} : { text }),
      ...(changes === undefined ? {} : { changes }),
    }).expect(200);
    return body.id;
  };
  const save: Workflow['save'] = (who, id, baseRevision, text, saveId = clientId()) =>
    app.send(who, 'PUT', `/api/drafts/${id}/text`, { saveId, baseRevision, text });
  return {
    ...app,
    ...extra,
    author,
    editor,
    reader,
    admin,
    post,
    get,
    seen,
    start,
    save,
    async publish(text, changes, writer = author, signer = editor) {
      const id = await start(writer, undefined, changes);
      await save(writer, id, 0, text).expect(200);
      await post(writer, `/api/drafts/${id}/send`, { ...(await seen(id)), note: 'A note.' }).expect(200);
      const { body } = await post(signer, `/api/reviews/${id}/sign-off`, {
        ...(await seen(id)),
        ticks: TICKS,
        note: '',
      }).expect(200);
      return { ...body, id };
    },
  };
}

async function addPerson(app: FreshApp, id: string, name: string, role: Role): Promise<Person> {
  const person = { id: `person-${id}`, name, email: `${id}@railway.example`, role };
  await app.db.insert(user).values({ ...person, createdAt: START, updatedAt: START });
  return person;
}

export async function setTeam(app: FreshApp, change: Partial<typeof team.$inferInsert>): Promise<void> {
  await app.db.update(team).set(change).where(eq(team.id, 1));
}

export { hashText };
