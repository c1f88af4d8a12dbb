import { mail } from '../database/schema.ts';
import type { Context } from '../http/context.ts';
import { type MailFacts, mailText } from './texts.ts';

/** To whom a mail goes, and what makes its link when it is sent. */
export interface Envelope {
  readonly recipient: string;
  readonly userId?: string;
  readonly invitationId?: string;
}

/** Puts a mail into the outbox, in the transaction of the act that causes it. The row never holds a token. */
export async function queueMail(
  { db, now, ids, settings }: Pick<Context, 'db' | 'now' | 'ids' | 'settings'>,
  { recipient, userId, invitationId }: Envelope,
  facts: MailFacts,
): Promise<void> {
  const text = mailText(facts, settings.publicUrl);
  await db.insert(mail).values({
    id: ids.uuid(),
    kind: facts.kind,
    recipient,
    ...text,
    userId: userId ?? null,
    invitationId: invitationId ?? null,
    createdAt: now,
  });
}
