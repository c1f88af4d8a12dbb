import { eq, sql } from 'drizzle-orm';
import { describe, expect, test } from 'vitest';
import { ACTIONS, AUTH_ROUTES, CONTRACT, type Endpoint, mayDo, ROLES, ROUTES, type RouteName } from '#api';
import { ok } from '#text';
import { OPEN_PATHS } from '../../server/app.ts';
import { rows } from '../../server/database/rows.ts';
import { notice, recipe, recipeVersion, user } from '../../server/database/schema.ts';
import type { Person } from '../../server/http/context.ts';
import { renewSetUpLink } from '../../server/services/accounts/setup.ts';
import { clientId, freshWorkflow, hashText, recipeText, TICKS, type Workflow } from './workflow-app.ts';

const NAMES = Object.keys(ROUTES) as RouteName[];
const ENDPOINTS: Readonly<Record<RouteName, Endpoint>> = CONTRACT;
const ID = '0f8fad5b-d9cb-469f-a165-70867728950e';
const SLUG = 'rail-splitter';
const PASSWORD = 'seven kettles over Bramley';
const TEXT = recipeText(SLUG);

/** A path with something well-formed in every place. */
function pathOf(name: RouteName, params: Readonly<Record<string, string>> = {}): string {
  const given: Readonly<Record<string, string>> = {
    id: ID,
    slug: SLUG,
    calculator: 'amp',
    saveId: 'save-00000000000001',
    ...params,
  };
  return ROUTES[name].path.replace(/:(\w+)/g, (_all, key: string) => given[key] ?? '');
}

interface Layer {
  readonly name: string;
  readonly route?: { readonly path: string; readonly stack: readonly { readonly method: string }[] };
}

/** Every method and path that the application answers. */
function registered(flow: Workflow): readonly string[] {
  const layers = (flow.app as unknown as { router: { stack: readonly Layer[] } }).router.stack;
  // A router of its own would hide its routes from this walk.
  expect(layers.filter((layer) => layer.name === 'router')).toEqual([]);
  return layers.flatMap(({ route }) =>
    route ? [...new Set(route.stack.map(({ method }) => `${method.toUpperCase()} ${route.path}`))] : [],
  );
}

describe('the table of routes', () => {
  test('covers every route that is registered, and every row of it is', async () => {
    const covered = [
      ...NAMES.map((name) => `${ROUTES[name].method} ${ROUTES[name].path}`),
      ...Object.keys(AUTH_ROUTES).map((path) => `POST ${path}`),
      ...OPEN_PATHS.map((path) => `GET ${path}`),
    ];
    const found = registered(await freshWorkflow());
    expect(found).toHaveLength(covered.length);
    expect(new Set(found)).toEqual(new Set(covered));
  });

  test('gives each row an action of the table of permissions and a place in the contract', () => {
    for (const name of NAMES) {
      expect(Object.keys(ACTIONS)).toContain(ROUTES[name].action);
      expect(CONTRACT[name].summary).not.toBe('');
    }
  });

  test('names a request id or a save id in every changing row but those that only look', () => {
    const without = NAMES.filter((name) => {
      const { body } = ENDPOINTS[name];
      const shape = body && 'shape' in body ? (body.shape as object) : {};
      return ROUTES[name].method !== 'GET' && !('requestId' in shape) && !('saveId' in shape);
    });
    expect(without).toEqual(['setup.check', 'invitations.check']);
  });
});

/** Code of a refusal by the first gate; null when the gate was passed, whatever came after. */
async function gateAnswer(flow: Workflow, who: Person | null, method: 'GET' | 'POST' | 'PUT' | 'PATCH', path: string) {
  const answer = await flow.send(who, method, path, method === 'GET' ? undefined : {});
  expect(answer.status, `${method} ${path}`).not.toBe(500);
  const code = answer.status >= 400 ? JSON.parse(answer.text).code : null;
  const byRole = code === 'forbidden' && JSON.parse(answer.text).detail.startsWith('Your role is');
  return code === 'not-signed-in' || byRole ? code : null;
}

describe('the first gate', () => {
  test.each([null, ...ROLES])('lets %s through where the table says so, and nowhere else', async (role) => {
    const flow = await freshWorkflow();
    const who = role === null ? null : flow.people[role];
    const refused = role === null ? 'not-signed-in' : 'forbidden';
    for (const name of NAMES) {
      const { method, action } = ROUTES[name];
      const expected = mayDo(role, action) ? null : refused;
      expect([name, await gateAnswer(flow, who, method, pathOf(name))]).toEqual([name, expected]);
    }
    for (const [path, action] of Object.entries(AUTH_ROUTES)) {
      const expected = mayDo(role, action) ? null : refused;
      expect([path, await gateAnswer(flow, who, 'POST', path)]).toEqual([path, expected]);
    }
  });

  test('keeps a deactivated person out of everything that needs a sign-in', async () => {
    const flow = await freshWorkflow();
    await flow.db.update(user).set({ deactivatedAt: flow.frame.clock() }).where(eq(user.id, flow.admin.id));
    for (const name of NAMES) {
      const { method, action } = ROUTES[name];
      const expected = ACTIONS[action] === 'anyone' ? null : 'not-signed-in';
      expect([name, await gateAnswer(flow, flow.admin, method, pathOf(name))]).toEqual([name, expected]);
    }
  });

  test('lets nothing else of better-auth through', async () => {
    const flow = await freshWorkflow();
    const others = [
      'sign-up/email',
      'update-user',
      'delete-user',
      'change-email',
      'get-session',
      'list-sessions',
      'token',
      'ok',
      'error',
      '',
    ];
    for (const path of others) {
      for (const method of ['GET', 'POST'] as const) {
        const answer = await flow.send(flow.admin, method, `/api/auth/${path}`, method === 'POST' ? {} : undefined);
        expect([path, method, answer.status]).toEqual([path, method, 404]);
      }
    }
    const get = await flow.send(flow.admin, 'GET', '/api/auth/sign-out');
    expect(get.status).toBe(404);
  });
});

/** One changing request, ready to be sent. */
interface Act {
  readonly who: Person | null;
  readonly params?: Readonly<Record<string, string>>;
  readonly body: object;
}
type ChangingName = { [N in RouteName]: (typeof ROUTES)[N]['method'] extends 'GET' ? never : N }[RouteName];

const withId = (body: object = {}) => ({ requestId: clientId(), ...body });

async function draftOf(flow: Workflow, inReview = false): Promise<string> {
  const id = await flow.start(flow.author, TEXT);
  if (inReview) {
    const seen = await flow.seen(id);
    await flow.post(flow.author, `/api/drafts/${id}/send`, { ...seen, note: '' }).expect(200);
  }
  return id;
}

async function invited(flow: Workflow): Promise<string> {
  const { body } = await flow
    .post(flow.admin, '/api/invitations', { email: 'new@railway.example', role: 'author' })
    .expect(200);
  return body.id;
}

async function invitationToken(flow: Workflow): Promise<string> {
  const { body } = await flow.post(flow.admin, `/api/invitations/${await invited(flow)}/link`).expect(200);
  return new URLSearchParams(new URL(body.url).hash.slice(1)).get('token') ?? '';
}

/** Takes the admin away and makes the link by which the first one is made. */
async function setUpToken(flow: Workflow): Promise<string> {
  await flow.db.update(user).set({ role: 'reader' }).where(eq(user.role, 'admin'));
  const made = await flow.act(null, async (context) => ok(await renewSetUpLink(context)));
  if (!made.ok || made.value === null) throw new Error('no set-up link was made');
  return new URLSearchParams(new URL(made.value.url).hash.slice(1)).get('token') ?? '';
}

const kept = { amp: { V_in: '2 V' } };
const keep = (version: number) =>
  withId({
    slug: SLUG,
    version,
    name: 'Lamp board',
    project: '',
    note: '',
    visibility: 'team',
    inputs: kept,
    shown: { engine: 1, calculators: {} },
  });

async function designOf(flow: Workflow): Promise<{ id: string; updatedAt: string }> {
  await flow.publish(TEXT);
  const { body } = await flow.send(flow.reader, 'POST', '/api/designs', keep(1)).expect(200);
  return body;
}

async function supplied(flow: Workflow): Promise<void> {
  await flow.publish(TEXT);
  await flow.db.update(recipe).set({ origin: 'supplied' });
  await flow.db.update(recipeVersion).set({ signedBy: null, signedAt: null, suppliedWith: '0.1.0' });
}

/** A request that succeeds, for every changing route; a route without one does not compile. */
const ACTS: { readonly [N in ChangingName]: (flow: Workflow) => Promise<Act> } = {
  'me.dismissNotice': async (flow) => {
    await flow.db.insert(notice).values({ id: ID, userId: flow.reader.id, kind: 'told', text: 'Look.' });
    return { who: flow.reader, params: { id: ID }, body: withId() };
  },
  'setup.check': async (flow) => ({ who: null, body: { token: await setUpToken(flow) } }),
  'setup.finish': async (flow) => ({
    who: null,
    body: withId({
      token: await setUpToken(flow),
      name: 'Una Firth',
      email: 'una@railway.example',
      password: PASSWORD,
    }),
  }),
  'invitations.check': async (flow) => ({ who: null, body: { token: await invitationToken(flow) } }),
  'invitations.accept': async (flow) => ({
    who: null,
    body: withId({ token: await invitationToken(flow), name: 'Nell Ash', password: PASSWORD }),
  }),
  'invitations.create': async (flow) => ({
    who: flow.admin,
    body: withId({ email: 'new@railway.example', role: 'author' }),
  }),
  'invitations.resend': async (flow) => ({ who: flow.admin, params: { id: await invited(flow) }, body: withId() }),
  'invitations.revoke': async (flow) => ({ who: flow.admin, params: { id: await invited(flow) }, body: withId() }),
  'invitations.makeLink': async (flow) => ({ who: flow.admin, params: { id: await invited(flow) }, body: withId() }),
  'people.update': async (flow) => ({
    who: flow.admin,
    params: { id: flow.reader.id },
    body: withId({ role: 'author' }),
  }),
  'people.makeLink': async (flow) => ({ who: flow.admin, params: { id: flow.reader.id }, body: withId() }),
  'team.update': async (flow) => ({ who: flow.admin, body: withId({ name: 'Fernhollow' }) }),
  'recipes.signOffSupplied': async (flow) => {
    await supplied(flow);
    return {
      who: flow.editor,
      params: { slug: SLUG },
      body: withId({ version: 1, hash: hashText(TEXT), ticks: TICKS }),
    };
  },
  'inputs.keep': async (flow) => {
    await flow.publish(recipeText(SLUG, 'GAIN 2'));
    const fields = { V_in: { text: '3 V', base: null } };
    return { who: flow.reader, params: { slug: SLUG, calculator: 'amp' }, body: { saveId: clientId(), fields } };
  },
  'drafts.start': async (flow) => ({ who: flow.author, body: withId({ text: TEXT }) }),
  'drafts.saveText': async (flow) => ({
    who: flow.author,
    params: { id: await draftOf(flow) },
    body: { saveId: clientId(), baseRevision: 0, text: `${TEXT}More.\n` },
  }),
  'drafts.setAuthors': async (flow) => ({
    who: flow.author,
    params: { id: await draftOf(flow) },
    body: withId({ personIds: [flow.coauthor.id] }),
  }),
  'drafts.discard': async (flow) => {
    const id = await draftOf(flow);
    return { who: flow.author, params: { id }, body: await flow.seen(id) };
  },
  'drafts.send': async (flow) => {
    const id = await draftOf(flow);
    return { who: flow.author, params: { id }, body: { ...(await flow.seen(id)), note: 'First.' } };
  },
  'drafts.takeBack': async (flow) => {
    const id = await draftOf(flow, true);
    return { who: flow.author, params: { id }, body: await flow.seen(id) };
  },
  'reviews.signOff': async (flow) => {
    const id = await draftOf(flow, true);
    return { who: flow.editor, params: { id }, body: { ...(await flow.seen(id)), ticks: TICKS, note: '' } };
  },
  'reviews.sendBack': async (flow) => {
    const id = await draftOf(flow, true);
    return { who: flow.editor, params: { id }, body: { ...(await flow.seen(id)), reason: 'Name the source.' } };
  },
  'designs.keep': async (flow) => {
    await flow.publish(TEXT);
    return { who: flow.reader, body: keep(1) };
  },
  'designs.update': async (flow) => {
    const { id, updatedAt } = await designOf(flow);
    return { who: flow.reader, params: { id }, body: withId({ updatedAt, name: 'Horn board' }) };
  },
  'designs.remove': async (flow) => {
    const { id, updatedAt } = await designOf(flow);
    return { who: flow.reader, params: { id }, body: withId({ updatedAt }) };
  },
};

/** How many rows each table holds: what an act left behind. */
async function counts(flow: Workflow): Promise<Readonly<Record<string, number>>> {
  const tables = await rows<{ name: string }>(
    flow.db,
    sql`select tablename as name from pg_tables where schemaname = 'public' order by 1`,
  );
  const found: Record<string, number> = {};
  for (const { name } of tables) {
    const [row] = await rows<{ count: number }>(
      flow.db,
      sql`select count(*)::int as count from ${sql.identifier(name)}`,
    );
    found[name] = row?.count ?? -1;
  }
  return found;
}

describe('a changing request that is sent twice at once', () => {
  test.each(Object.keys(ACTS) as ChangingName[])('has one effect and one answer: %s', async (name) => {
    const once = await freshWorkflow();
    const alone = await ACTS[name](once);
    await once.send(alone.who, ROUTES[name].method, pathOf(name, alone.params), alone.body).expect(200);
    const expected = await counts(once);

    const twice = await freshWorkflow();
    const act = await ACTS[name](twice);
    const send = async () => twice.send(act.who, ROUTES[name].method, pathOf(name, act.params), act.body);
    const [first, second] = await Promise.all([send(), send()]);
    expect([first.status, second.status]).toEqual([200, 200]);
    expect(second.body).toEqual(first.body);
    expect(await counts(twice)).toEqual(expected);

    const later = await send();
    expect([later.status, later.body]).toEqual([200, first.body]);
    expect(await counts(twice)).toEqual(expected);
  });

  test('by two people with the same id is two requests', async () => {
    const flow = await freshWorkflow();
    const body = { requestId: clientId(), text: TEXT };
    const [mine, theirs] = await Promise.all([
      flow.send(flow.author, 'POST', '/api/drafts', body),
      flow.send(flow.coauthor, 'POST', '/api/drafts', body),
    ]);
    expect([mine.status, theirs.status]).toEqual([200, 200]);
    expect(mine.body.id).not.toBe(theirs.body.id);
  });
});
