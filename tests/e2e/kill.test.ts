import { randomBytes } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { type BuiltServer, freePort, startBuilt } from './server.ts';

const KILLS = 10;
const DRAFTS = 4;
const ADMIN = { email: 'ada@railway.example', password: 'a lantern on the north platform' };
const clientId = () => randomBytes(16).toString('base64url');

/** One save as the page keeps it until it is acknowledged. */
interface Save {
  readonly saveId: string;
  readonly baseRevision: number;
  readonly text: string;
}
interface Acknowledged extends Save {
  readonly revision: number;
}
/** What a page that writes one draft knows. */
interface Tab {
  readonly id: string;
  readonly acknowledged: Acknowledged[];
  /** In flight, or its answer was lost. */
  unanswered: Save | null;
}

let folder: string;
let server: BuiltServer | undefined;
let cookie: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'quadrille-kill-'));
});
afterEach(async () => {
  await server?.stop('SIGKILL');
  server = undefined;
  rmSync(folder, { recursive: true, force: true });
});

function running(): BuiltServer {
  if (server === undefined) throw new Error('the server does not run');
  return server;
}

async function call(method: string, path: string, body?: object): Promise<Response> {
  return fetch(`${running().url}${path}`, {
    method,
    headers: { origin: running().url, cookie, 'content-type': 'application/json' },
    ...(body === undefined ? {} : { body: JSON.stringify(body) }),
  });
}

async function answer<T>(method: string, path: string, body?: object): Promise<T> {
  const response = await call(method, path, body);
  if (!response.ok) throw new Error(`${method} ${path}: ${response.status} ${await response.text()}`);
  // Shapes are those of the contract; the tests of the services check them.
  return (await response.json()) as T;
}

async function signIn(): Promise<void> {
  cookie = '';
  const token = new URL(running().setUpLink ?? '').hash.replace('#token=', '');
  await answer('POST', '/api/setup', { requestId: clientId(), token, name: 'Ada Quill', ...ADMIN });
  const response = await call('POST', '/api/auth/sign-in/email', ADMIN);
  cookie = response.headers
    .getSetCookie()
    .map((one) => one.split(';')[0])
    .join('; ');
}

/** Saves on and on, one save in flight, until the server is gone. Tells of each acknowledgement. */
async function write(tab: Tab, acknowledged: () => void): Promise<void> {
  for (;;) {
    const last = tab.acknowledged.at(-1);
    const baseRevision = last?.revision ?? 0;
    const save = { saveId: clientId(), baseRevision, text: `${tab.id} after ${baseRevision}\n${'word '.repeat(800)}` };
    tab.unanswered = save;
    try {
      const { revision } = await answer<{ revision: number }>('PUT', `/api/drafts/${tab.id}/text`, save);
      tab.acknowledged.push({ ...save, revision });
    } catch (error) {
      // A refusal by a living server is a failure of the test; a broken connection is what the test is about.
      if (error instanceof TypeError) return;
      throw error;
    }
    tab.unanswered = null;
    acknowledged();
  }
}

/** Writes all drafts at once and kills the server in the middle of it, after so many acknowledgements. */
async function writeUntilKilled(tabs: readonly Tab[], after: number): Promise<void> {
  let count = 0;
  const killed: Promise<unknown>[] = [];
  const acknowledged = () => {
    count++;
    if (count === after) killed.push(running().stop('SIGKILL'));
  };
  await Promise.all(tabs.map((tab) => write(tab, acknowledged)));
  await Promise.all(killed);
}

/** Every acknowledged save stands in the history with its revision, and nothing older is the draft's text. */
async function expectKept(tab: Tab): Promise<void> {
  const { saves } = await answer<{ saves: { saveId: string; revision: number | null }[] }>(
    'GET',
    `/api/drafts/${tab.id}/saves`,
  );
  const revisions = new Map(saves.map((save) => [save.saveId, save.revision]));
  const lost = tab.acknowledged.filter((save) => revisions.get(save.saveId) !== save.revision);
  expect(lost).toEqual([]);
  const { text, draft } = await answer<{ text: string; draft: { revision: number } }>('GET', `/api/drafts/${tab.id}`);
  const last = tab.acknowledged.at(-1);
  const arrived = tab.unanswered !== null && revisions.has(tab.unanswered.saveId);
  expect(draft.revision).toBe((last?.revision ?? 0) + (arrived ? 1 : 0));
  expect(text).toBe(arrived ? tab.unanswered?.text : (last?.text ?? ''));
}

/** Sends the save again whose answer was lost, as the page does when the server is back. */
async function sendAgain(tab: Tab): Promise<void> {
  if (tab.unanswered === null) return;
  const { revision } = await answer<{ revision: number }>('PUT', `/api/drafts/${tab.id}/text`, tab.unanswered);
  expect(revision).toBe(tab.unanswered.baseRevision + 1);
  tab.acknowledged.push({ ...tab.unanswered, revision });
  tab.unanswered = null;
}

describe('a server killed while drafts are saved', () => {
  test(`has every acknowledged save after the restart, ${KILLS} times over`, { timeout: 600_000 }, async () => {
    const data = join(folder, 'data');
    const port = await freePort();
    server = await startBuilt(data, port);
    await signIn();
    const tabs: Tab[] = [];
    for (let n = 0; n < DRAFTS; n++) {
      const { id } = await answer<{ id: string }>('POST', '/api/drafts', { requestId: clientId() });
      tabs.push({ id, acknowledged: [], unanswered: null });
    }
    for (let kill = 0; kill < KILLS; kill++) {
      const before = tabs.reduce((sum, tab) => sum + tab.acknowledged.length, 0);
      await writeUntilKilled(tabs, 7 + 3 * kill);
      const now = tabs.reduce((sum, tab) => sum + tab.acknowledged.length, 0);
      expect(now - before).toBeGreaterThanOrEqual(7 + 3 * kill);
      server = await startBuilt(data, port);
      for (const tab of tabs) await expectKept(tab);
      for (const tab of tabs) await sendAgain(tab);
    }
  });
});
