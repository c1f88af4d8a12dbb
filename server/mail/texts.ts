import type { Role } from '#api';
import { assertNever } from '#text';

/** Every mail that Quadrille writes, with the facts its text needs. None carries a token. */
export type MailFacts =
  | { readonly kind: 'invitation'; readonly invitedBy: string; readonly role: Role }
  | { readonly kind: 'password-reset' }
  | { readonly kind: 'review-asked'; readonly by: string; readonly recipe: string; readonly note: string }
  | { readonly kind: 'sent-back'; readonly by: string; readonly recipe: string; readonly reason: string }
  | { readonly kind: 'published'; readonly by: string; readonly recipe: string; readonly version: number };
export type MailKind = MailFacts['kind'];

export interface MailText {
  readonly subject: string;
  readonly body: string;
}

const NO_LINK_YET =
  'While no mail server is set, this mail stays in Quadrille and carries no link: an admin makes the link on the Team page and hands it over by other means.';

/** Writes a mail in words. `publicUrl` has no closing slash. */
export function mailText(facts: MailFacts, publicUrl: string): MailText {
  switch (facts.kind) {
    case 'invitation':
      return {
        subject: `${facts.invitedBy} invites you to Quadrille`,
        body: lines(
          `${facts.invitedBy} invites you as ${facts.role} to the team’s circuit recipes at ${publicUrl}.`,
          NO_LINK_YET,
        ),
      };
    case 'password-reset':
      return {
        subject: 'A new password for Quadrille',
        body: lines(
          `Somebody asked for a new password for your account at ${publicUrl}. If it was not you, nothing needs to be done.`,
          NO_LINK_YET,
        ),
      };
    case 'review-asked':
      return {
        subject: `For review: ${facts.recipe}`,
        body: lines(`${facts.by} sent ${facts.recipe} for review.`, facts.note, `${publicUrl}/reviews`),
      };
    case 'sent-back':
      return {
        subject: `Sent back: ${facts.recipe}`,
        body: lines(`${facts.by} sent ${facts.recipe} back:`, facts.reason, `${publicUrl}/recipes`),
      };
    case 'published':
      return {
        subject: `Published: ${facts.recipe}, version ${facts.version}`,
        body: lines(`${facts.by} signed off version ${facts.version} of ${facts.recipe}.`, `${publicUrl}/recipes`),
      };
    default:
      return assertNever(facts);
  }
}

function lines(...paragraphs: string[]): string {
  return paragraphs.filter((paragraph) => paragraph !== '').join('\n\n');
}
