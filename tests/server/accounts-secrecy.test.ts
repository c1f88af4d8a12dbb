import { sql } from 'drizzle-orm';
import { pino } from 'pino';
import { expect, test } from 'vitest';
import { createApp } from '../../server/app.ts';
import { rows } from '../../server/database/rows.ts';
import { user } from '../../server/database/schema.ts';
import { createAccounts } from '../../server/http/accounts.ts';
import { noPages } from '../../server/http/pages.ts';
import { makeLinkByCommand } from '../../server/services/accounts/people.ts';
import { ACCOUNT_SERVICES, accountApp, openBrowser, PASSWORD, requestId, setUpToken, tokenIn } from './account-app.ts';
import { ORIGIN } from './fresh-app.ts';
import { standIns } from './stand-ins.ts';

test('no token and no password stands in any table, captured mail or log line after every kind of link was made and used', async () => {
  const fresh = await accountApp();
  await fresh.db.delete(user);
  const lines: string[] = [];
  const log = pino({ level: 'trace' }, { write: (line) => lines.push(line) });
  const accounts = createAccounts({ ...fresh.frame, origins: [ORIGIN], log });
  const app = createApp({
    frame: { ...fresh.frame, accounts, log },
    services: standIns(ACCOUNT_SERVICES),
    origins: [ORIGIN],
    behindProxy: true,
    pages: noPages,
    securityHeaders: true,
  });
  const page = () => openBrowser(app, '192.0.2.1');
  const secrets: string[] = [];
  const keep = (secret: string) => {
    expect(secret.length).toBeGreaterThanOrEqual(12);
    secrets.push(secret);
    return secret;
  };

  const setUp = keep((await setUpToken(fresh)) ?? '');
  const first = { requestId: requestId(), token: setUp, name: 'Wanda Pike', email: 'w@railway.example' };
  await page().post('/api/setup', { ...first, password: keep(`${PASSWORD} one`) });
  const admin = page();
  expect((await admin.signIn('w@railway.example', `${PASSWORD} one`)).status).toBe(200);

  const email = 'nils@railway.example';
  const invited = await admin.post('/api/invitations', { requestId: requestId(), email, role: 'reader' });
  for (let n = 0; n < 2; n += 1) {
    const made = await admin.post(`/api/invitations/${invited.body.id}/link`, { requestId: requestId() });
    keep(tokenIn(made.body.url));
  }
  await admin.post(`/api/invitations/${invited.body.id}/resend`, { requestId: requestId() });
  const used = await admin.post(`/api/invitations/${invited.body.id}/link`, { requestId: requestId() });
  const accepted = { requestId: requestId(), token: keep(tokenIn(used.body.url)), name: 'Nils Berg' };
  await page().post('/api/invitations/check', { token: accepted.token });
  const nils = await page().post('/api/invitations/accept', { ...accepted, password: keep(`${PASSWORD} two`) });
  expect(nils.status).toBe(200);

  await page().post('/api/auth/request-password-reset', { email });
  const people = (await admin.get('/api/people')).body.people;
  const { id } = people.find(({ name }: { name: string }) => name === 'Nils Berg');
  const link = await admin.post(`/api/people/${id}/link`, { requestId: requestId() });
  const reset = { token: keep(tokenIn(link.body.url)), newPassword: keep(`${PASSWORD} three`) };
  expect((await page().post('/api/auth/reset-password', reset)).status).toBe(200);
  expect((await page().post('/api/auth/reset-password', reset)).status).toBe(410);
  const byCommand = await fresh.act(null, (context) => makeLinkByCommand(context, email));
  keep(byCommand.ok ? tokenIn(byCommand.value.url) : '');
  await page().signIn(email, keep('not the right password'));

  const dump = JSON.stringify(await everyTable(fresh.db));
  expect(dump).toContain('nils@railway.example');
  const logged = lines.join('\n');
  expect(logged).toContain('/api/auth/reset-password');
  expect(secrets).toHaveLength(10);
  for (const secret of secrets) {
    expect(dump).not.toContain(secret);
    expect(logged).not.toContain(secret);
  }
  expect(logged).not.toContain(email);
});

async function everyTable(db: Parameters<typeof rows>[0]): Promise<unknown[]> {
  const names = await rows<{ name: string }>(
    db,
    sql`select quote_ident(tablename) as name from pg_tables where schemaname = 'public'`,
  );
  expect(names.length).toBeGreaterThan(20);
  return Promise.all(names.map(({ name }) => rows(db, sql.raw(`select * from ${name}`))));
}
