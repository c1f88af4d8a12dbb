import { randomBytes } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Answer, Body, DesignRow, RouteName } from '#api';
import { ROUTES } from '#api';
import { evaluateInOrder, linkCalculator, shownNumbers } from '#calculator';

export interface Account {
  readonly email: string;
  readonly password: string;
}

/**
 * Plays the first days of the demo's team over the program's own address, as its people would: the author writes a recipe, the editor
 * signs it off, the reader keeps designs of it, and the author's change of it waits in review.
 * When it cannot: throws with the answer; a demo that does not come up whole is a fault of the program.
 */
export async function playScenario(url: string, folder: string, team: Record<'author' | 'editor' | 'reader', Account>) {
  const [author, editor, reader] = await Promise.all([
    signIn(url, team.author),
    signIn(url, team.editor),
    signIn(url, team.reader),
  ]);
  const text = (name: string) => readFileSync(join(folder, name), 'utf8');

  const first = await author.send('drafts.start', {}, { requestId: makeId(), text: text('shed-thermometer.mdx') });
  await sendForReview(author, first.id, 'First version, checked on the bench at two points.');
  const { slug } = await signOff(editor, first.id);

  await keepDesign(reader, slug, 'North pit thermometer', 'Carriage shed', { T: '-10 °C to 45 °C', R2: '47k' });
  await keepDesign(reader, slug, 'Boiler house, hot side', 'Carriage shed', { T: '10 °C to 60 °C', V_off: '1 V' });
  await keepDesign(reader, 'difference-amplifier-with-gain', 'Lamp circuit pick-off', 'Signal hut', { V_d: '±300 mV' });

  const { id } = await author.send('drafts.start', {}, { requestId: makeId(), changes: slug });
  await author.send(
    'drafts.saveText',
    { id },
    {
      saveId: makeId(),
      baseRevision: 0,
      text: text('shed-thermometer-changed.mdx'),
    },
  );
  await sendForReview(author, id, 'More volts per kelvin: the logger has only 8 bits.');
}

async function sendForReview(author: Browser, id: string, note: string) {
  const { draft, hash } = await author.read('drafts.read', { id });
  await author.send('drafts.send', { id }, { requestId: makeId(), revision: draft.revision, hash, note });
}

async function signOff(editor: Browser, id: string): Promise<Answer<'reviews.signOff'>> {
  const { review, hash, ticks } = await editor.read('reviews.read', { id });
  const decision = { requestId: makeId(), revision: review.draft.revision, hash, ticks, note: '' };
  return editor.send('reviews.signOff', { id }, decision);
}

/** Keeps a design of the recipe's first calculator. */
async function keepDesign(
  reader: Browser,
  slug: string,
  name: string,
  project: string,
  typed: Record<string, string>,
): Promise<DesignRow> {
  const { document, version } = await reader.read('recipes.read', { slug });
  const calculator = document.calculators[0]?.id ?? '';
  const inputs = { [calculator]: typed };
  const evaluated = evaluateInOrder(document.calculators.map(linkCalculator), inputs);
  return reader.send(
    'designs.keep',
    {},
    {
      requestId: makeId(),
      slug,
      version: version.version,
      name,
      project,
      note: '',
      visibility: 'team',
      inputs,
      shown: { engine: document.compiler, calculators: shownNumbers(evaluated.values()) },
    },
  );
}

interface Browser {
  read<N extends RouteName>(name: N, parameters: Record<string, string>): Promise<Answer<N>>;
  send<N extends RouteName>(name: N, parameters: Record<string, string>, body: Body<N>): Promise<Answer<N>>;
}

async function signIn(url: string, { email, password }: Account): Promise<Browser> {
  const answer = await fetch(`${url}/api/auth/sign-in/email`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', origin: url },
    body: JSON.stringify({ email, password }),
  });
  if (!answer.ok) throw new Error(`the demo could not sign in: ${answer.status} ${await answer.text()}`);
  const cookie = answer.headers
    .getSetCookie()
    .map((line) => line.split(';', 1)[0])
    .join('; ');
  const call = async <N extends RouteName>(name: N, parameters: Record<string, string>, body?: Body<N>) => {
    const { method, path } = ROUTES[name];
    const filled = path.replace(/:(\w+)/g, (_, key: string) => encodeURIComponent(parameters[key] ?? ''));
    const reply = await fetch(`${url}${filled}`, {
      method,
      headers: { 'content-type': 'application/json', origin: url, cookie },
      ...(body === undefined ? {} : { body: JSON.stringify(body) }),
    });
    if (!reply.ok) throw new Error(`the demo's ${name} was refused: ${reply.status} ${await reply.text()}`);
    return (await reply.json()) as Answer<N>;
  };
  return { read: call, send: call };
}

/** As a browser makes them for saves and requests. */
function makeId(): string {
  return randomBytes(16).toString('base64url');
}
