import { beforeEach, describe, expect, test } from 'vitest';
import { keptInput } from '../../server/database/schema.ts';
import type { Person } from '../../server/http/context.ts';
import { clientId, freshWorkflow, recipeText, type Workflow } from './workflow-app.ts';

let flow: Workflow;
beforeEach(async () => {
  flow = await freshWorkflow();
  await flow.publish(recipeText('amp', 'GAIN 2'));
});

type Fields = Record<string, { text: string | null; base: string | null }>;
const keep = (who: Person, fields: Fields, saveId = clientId(), calculator = 'amp') =>
  flow.send(who, 'PATCH', `/api/recipes/amp/inputs/${calculator}`, { saveId, fields });
const read = async (who: Person) => (await flow.get(who, '/api/recipes/amp/inputs').expect(200)).body.calculators;

describe('keeping inputs', () => {
  test('what was typed comes back, per person and per calculator, and the answer holds all fields', async () => {
    await keep(flow.reader, { V_in: { text: '2 V', base: null } }).expect(200);
    const { body } = await keep(flow.reader, { R: { text: '10 kΩ', base: null } }).expect(200);
    expect(body).toEqual({ fields: { V_in: '2 V', R: '10 kΩ' }, moved: [] });
    await keep(flow.reader, { x: { text: '1', base: null } }, clientId(), 'other').expect(200);
    expect(await read(flow.reader)).toEqual({ amp: { V_in: '2 V', R: '10 kΩ' }, other: { x: '1' } });
    expect(await read(flow.author)).toEqual({});
  });

  test('of two tabs the last to arrive wins, field by field, and is told which had moved', async () => {
    await keep(flow.reader, { V_in: { text: '2 V', base: null }, R: { text: '1 kΩ', base: null } }).expect(200);
    const { body } = await keep(flow.reader, { V_in: { text: '3 V', base: null } }).expect(200);
    expect(body).toEqual({ fields: { V_in: '3 V', R: '1 kΩ' }, moved: ['V_in'] });
    const next = await keep(flow.reader, { V_in: { text: '4 V', base: '3 V' } }).expect(200);
    expect(next.body.moved).toEqual([]);
  });

  test('two first saves at once lose no field', async () => {
    const answers = await Promise.all([
      keep(flow.reader, { V_in: { text: '2 V', base: null } }),
      keep(flow.reader, { R: { text: '1 kΩ', base: null } }),
    ]);
    expect(answers.map((a) => a.status)).toEqual([200, 200]);
    expect(await read(flow.reader)).toEqual({ amp: { V_in: '2 V', R: '1 kΩ' } });
  });

  test('a field put back to the recipe’s value is forgotten', async () => {
    await keep(flow.reader, { V_in: { text: '2 V', base: null }, R: { text: '1 kΩ', base: null } }).expect(200);
    const { body } = await keep(flow.reader, { V_in: { text: null, base: '2 V' } }).expect(200);
    expect(body).toEqual({ fields: { R: '1 kΩ' }, moved: [] });
  });

  test('a repeated save gets its first answer and changes nothing, even after a save from another tab', async () => {
    const saveId = clientId();
    const first = await keep(flow.reader, { V_in: { text: '2 V', base: null } }, saveId).expect(200);
    await keep(flow.reader, { V_in: { text: '3 V', base: '2 V' } }).expect(200);
    const again = await keep(flow.reader, { V_in: { text: '2 V', base: null } }, saveId).expect(200);
    expect(again.body).toEqual(first.body);
    expect(await read(flow.reader)).toEqual({ amp: { V_in: '3 V' } });
  });

  test('the same save sent twice at once has one effect and one answer', async () => {
    const saveId = clientId();
    const [a, b] = await Promise.all(
      [0, 1].map(() => keep(flow.reader, { V_in: { text: '2 V', base: null } }, saveId)),
    );
    expect([a?.status, b?.status]).toEqual([200, 200]);
    expect(a?.body).toEqual(b?.body);
  });

  test('one save id of two people is two saves', async () => {
    const saveId = clientId();
    await keep(flow.reader, { V_in: { text: '2 V', base: null } }, saveId).expect(200);
    const { body } = await keep(flow.author, { V_in: { text: '5 V', base: null } }, saveId).expect(200);
    expect(body.fields).toEqual({ V_in: '5 V' });
  });

  test('names that a version lacks stay, and names of the language of the server are names like others', async () => {
    await keep(flow.reader, { gone: { text: '7', base: null }, constructor: { text: '1', base: null } }).expect(200);
    await flow.publish(recipeText('amp', 'GAIN 3'), 'amp');
    expect(await read(flow.reader)).toEqual({ amp: { gone: '7', constructor: '1' } });
  });

  test('more than 500 names are refused and what was kept stays', async () => {
    await keep(flow.reader, { V_in: { text: '2 V', base: null } }).expect(200);
    const many = Object.fromEntries(Array.from({ length: 500 }, (_, i) => [`n${i}`, { text: '1', base: null }]));
    await keep(flow.reader, many).expect(400);
    expect(await flow.db.select().from(keptInput)).toMatchObject([{ fields: { V_in: '2 V' } }]);
  });

  test('a recipe that was never published takes none', async () => {
    await flow.start(flow.author, recipeText('hidden'));
    const send = flow.send(flow.author, 'PATCH', '/api/recipes/hidden/inputs/amp', { saveId: clientId(), fields: {} });
    await send.expect(404);
    await flow.get(flow.author, '/api/recipes/hidden/inputs').expect(404);
  });
});
