import { type Channel, openChannel } from './channel.ts';

/** What tabs of one person tell each other of one draft. */
export type DraftMessage =
  /** A text was kept as this revision. */
  | { readonly kind: 'kept'; readonly revision: number }
  /** It was sent, taken back, decided on or put aside: whoever shows it reads it again. */
  | { readonly kind: 'state' }
  | { readonly kind: 'who' }
  | { readonly kind: 'here'; readonly key: string };

function readMessage(message: unknown): DraftMessage | null {
  if (typeof message !== 'object' || message === null) return null;
  const kind: unknown = Reflect.get(message, 'kind');
  const revision: unknown = Reflect.get(message, 'revision');
  const key: unknown = Reflect.get(message, 'key');
  if (kind === 'who' || kind === 'state') return { kind };
  if (kind === 'kept' && typeof revision === 'number') return { kind, revision };
  return kind === 'here' && typeof key === 'string' ? { kind, key } : null;
}

export function openDraftChannel(
  personId: string,
  draftId: string,
  onMessage: (message: DraftMessage) => void,
): Channel<DraftMessage> {
  return openChannel(`draft/${personId}/${draftId}`, readMessage, onMessage);
}

/** Tells it once, from where no channel is open: also pages of this tab that show the draft hear of it. */
export function tellOfDraft(personId: string, draftId: string, message: DraftMessage): void {
  const channel = openDraftChannel(personId, draftId, () => undefined);
  channel.tell(message);
  channel.close();
}
