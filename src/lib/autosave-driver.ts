import {
  type AutosaveEvent,
  type AutosaveState,
  advance,
  type Merge,
  nextStep,
  startOf,
  type Timing,
  unsentPayload,
} from './autosave.ts';
import type { ClientFailure } from './failure.ts';
import { newId } from './ids.ts';

/** What one try to keep something came to. */
export type Kept<B, C> =
  | { readonly kind: 'kept'; readonly base: B }
  | { readonly kind: 'conflict'; readonly conflict: C }
  | { readonly kind: 'failed'; readonly failure: ClientFailure };

export interface AutosaveSettings<P, B, C> {
  readonly base: B;
  readonly timing: Timing;
  readonly merge: Merge<P>;
  readonly send: (save: {
    readonly saveId: string;
    readonly payload: P;
    readonly base: B;
    readonly keepalive: boolean;
  }) => Promise<Kept<B, C>>;
  /** Keeps in the browser what the server has not acknowledged; null when nothing is left. */
  readonly remember: (payload: P | null) => void;
  /**
   * Whether a newer save may be sent beside the one in flight when the page goes. True where the last to arrive wins
   * (kept inputs); false where a save names the revision before it (drafts).
   */
  readonly mayOverlap: boolean;
}

export interface Autosave<P, B, C> {
  readonly state: () => AutosaveState<P, B, C>;
  readonly subscribe: (listener: () => void) => () => void;
  readonly change: (payload: P) => void;
  readonly resolve: (base: B, payload: P | null) => void;
  /** Sends at once what waits, and gives the state when nothing is in flight any more: kept, refused or in conflict. */
  readonly settle: () => Promise<AutosaveState<P, B, C>>;
  /** Takes part in the page's life: connection back, page hidden, page gone. Gives the way to stop. */
  readonly attach: () => () => void;
}

/** Runs the reducer of `autosave`: timers, sending, and what happens when the page goes. */
export function createAutosave<P, B, C>(settings: AutosaveSettings<P, B, C>): Autosave<P, B, C> {
  let state: AutosaveState<P, B, C> = startOf(settings.base);
  let timer: ReturnType<typeof setTimeout> | undefined;
  let remembered: P | null = null;
  const listeners = new Set<() => void>();

  function dispatch(event: AutosaveEvent<P, B, C>): void {
    state = advance(state, event, settings.merge);
    const unsent = unsentPayload(state, settings.merge);
    if (unsent !== remembered) {
      remembered = unsent;
      settings.remember(unsent);
    }
    schedule();
    for (const listener of listeners) listener();
  }

  function schedule(): void {
    clearTimeout(timer);
    const step = nextStep(state, settings.timing);
    if (step !== null) timer = setTimeout(() => act(step.kind, false), Math.max(0, step.at - Date.now()));
  }

  function act(kind: 'send' | 'again', keepalive: boolean): void {
    dispatch(kind === 'send' ? { kind: 'send', saveId: newId() } : { kind: 'again' });
    const { flight } = state;
    if (flight !== null && flight.againAt === null) void fly(flight, keepalive);
  }

  async function fly(flight: NonNullable<typeof state.flight>, keepalive: boolean): Promise<void> {
    const { saveId, payload, base } = flight;
    const kept = await settings.send({ saveId, payload, base, keepalive });
    if (kept.kind === 'kept') dispatch({ kind: 'kept', saveId, base: kept.base });
    else if (kept.kind === 'conflict') dispatch({ kind: 'conflicted', saveId, conflict: kept.conflict });
    else dispatch({ kind: 'failed', saveId, failure: kept.failure, now: Date.now() });
  }

  function sendNow(keepalive: boolean): void {
    const step = nextStep(state, settings.timing);
    if (step !== null) act(step.kind, keepalive);
  }

  function leave(): void {
    const isFlying = state.flight !== null && state.flight.againAt === null;
    if (!isFlying) sendNow(true);
    else if (settings.mayOverlap && state.pending !== null) {
      // The page may be gone before the answer comes. Should it stay, the pending change is sent once more, which changes nothing.
      void settings.send({ saveId: newId(), payload: state.pending.payload, base: state.base, keepalive: true });
    }
  }

  function subscribe(listener: () => void): () => void {
    listeners.add(listener);
    return () => listeners.delete(listener);
  }

  function settle(): Promise<AutosaveState<P, B, C>> {
    return new Promise((done) => {
      let stop = () => {};
      const look = () => {
        const isFlying = state.flight !== null && state.flight.againAt === null;
        if (isFlying) return;
        const step = nextStep(state, settings.timing);
        if (step?.kind === 'send') return sendNow(false);
        stop();
        done(state);
      };
      stop = subscribe(look);
      sendNow(false);
      look();
    });
  }

  function attach(): () => void {
    const onHidden = () => document.visibilityState === 'hidden' && leave();
    const onBack = () => state.flight !== null && sendNow(false);
    window.addEventListener('pagehide', leave);
    window.addEventListener('online', onBack);
    document.addEventListener('visibilitychange', onHidden);
    return () => {
      window.removeEventListener('pagehide', leave);
      window.removeEventListener('online', onBack);
      document.removeEventListener('visibilitychange', onHidden);
      leave();
      clearTimeout(timer);
    };
  }

  return {
    state: () => state,
    subscribe,
    change: (payload) => dispatch({ kind: 'changed', payload, now: Date.now() }),
    resolve: (base, payload) => dispatch({ kind: 'resolved', base, payload, now: Date.now() }),
    settle,
    attach,
  };
}
