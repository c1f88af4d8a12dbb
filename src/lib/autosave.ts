import { type ClientFailure, mayTryAgain } from './failure.ts';

/**
 * Saving by itself without losing a word, for both protocols (draft text, kept inputs): a pure reducer, driven by
 * `autosave-driver`. One save is in flight at a time; a save whose answer was lost is repeated under its own id, with
 * its own contents, before anything newer is sent, so the server can give the first answer again.
 * Terms: payload (what is to be kept), base (what the server last acknowledged), conflict (the server's 409).
 * Units: milliseconds; the clock is passed in.
 */
export interface Timing {
  /** Quiet time after the last change before it is sent. */
  readonly quietMs: number;
  /** The longest a change waits while changes keep coming. */
  readonly longestMs: number;
}

export interface Flight<P, B> {
  readonly saveId: string;
  readonly payload: P;
  readonly base: B;
  /** When it is sent again; null while an answer is awaited. */
  readonly againAt: number | null;
  readonly tries: number;
}

export interface Pending<P> {
  readonly payload: P;
  readonly firstAt: number;
  readonly lastAt: number;
}

export interface AutosaveState<P, B, C> {
  readonly base: B;
  readonly pending: Pending<P> | null;
  readonly flight: Flight<P, B> | null;
  readonly conflict: C | null;
  /** The last failure, until something is kept again. */
  readonly failure: ClientFailure | null;
}

export type AutosaveEvent<P, B, C> =
  | { readonly kind: 'changed'; readonly payload: P; readonly now: number }
  | { readonly kind: 'send'; readonly saveId: string }
  | { readonly kind: 'again' }
  | { readonly kind: 'kept'; readonly saveId: string; readonly base: B }
  | { readonly kind: 'failed'; readonly saveId: string; readonly failure: ClientFailure; readonly now: number }
  | { readonly kind: 'conflicted'; readonly saveId: string; readonly conflict: C }
  /** The person has decided: go on from `base`; `payload` is what is to be kept next, null for nothing. */
  | { readonly kind: 'resolved'; readonly base: B; readonly payload: P | null; readonly now: number };

export type Merge<P> = (older: P, newer: P) => P;

export function startOf<P, B, C>(base: B): AutosaveState<P, B, C> {
  return { base, pending: null, flight: null, conflict: null, failure: null };
}

/** Pauses between tries; the last one stays. Source: common practice, no source. */
const PAUSES_MS = [1000, 2000, 4000, 8000, 15_000, 30_000] as const;

export function pauseAfter(tries: number): number {
  return PAUSES_MS[Math.min(tries, PAUSES_MS.length) - 1] ?? PAUSES_MS[0];
}

/** The next state. `merge` joins an unsent change with a newer one: the newer text, or all fields of both. */
export function advance<P, B, C>(
  state: AutosaveState<P, B, C>,
  event: AutosaveEvent<P, B, C>,
  merge: Merge<P>,
): AutosaveState<P, B, C> {
  switch (event.kind) {
    case 'changed':
      return { ...state, pending: addChange(state.pending, event.payload, event.now, merge) };
    case 'send':
      if (state.pending === null || state.flight !== null || state.conflict !== null) return state;
      return {
        ...state,
        pending: null,
        flight: { saveId: event.saveId, payload: state.pending.payload, base: state.base, againAt: null, tries: 1 },
      };
    case 'again':
      if (state.flight === null || state.flight.againAt === null) return state;
      return { ...state, flight: { ...state.flight, againAt: null, tries: state.flight.tries + 1 } };
    case 'kept':
      if (state.flight?.saveId !== event.saveId) return state;
      return { ...state, base: event.base, flight: null, failure: null };
    case 'failed':
      return afterFailure(state, event, merge);
    case 'conflicted':
      if (state.flight?.saveId !== event.saveId) return state;
      return {
        ...state,
        conflict: event.conflict,
        flight: null,
        failure: null,
        pending: returned(state.flight, state.pending, merge),
      };
    case 'resolved':
      return {
        base: event.base,
        flight: null,
        conflict: null,
        failure: null,
        pending: event.payload === null ? null : { payload: event.payload, firstAt: event.now, lastAt: event.now },
      };
    default:
      return event satisfies never;
  }
}

/** Marks contents that a refusal sent back: they wait for the next change instead of being sent again by themselves. */
const NEVER_SENT = Number.POSITIVE_INFINITY;

function addChange<P>(pending: Pending<P> | null, payload: P, now: number, merge: Merge<P>): Pending<P> {
  if (pending === null) return { payload, firstAt: now, lastAt: now };
  const firstAt = pending.firstAt === NEVER_SENT ? now : pending.firstAt;
  return { payload: merge(pending.payload, payload), firstAt, lastAt: now };
}

/** What was in flight goes back to what is to be sent, below what was typed since. */
function returned<P, B>(flight: Flight<P, B>, pending: Pending<P> | null, merge: Merge<P>): Pending<P> {
  if (pending === null) return { payload: flight.payload, firstAt: NEVER_SENT, lastAt: NEVER_SENT };
  return { ...pending, payload: merge(flight.payload, pending.payload) };
}

function afterFailure<P, B, C>(
  state: AutosaveState<P, B, C>,
  event: { readonly saveId: string; readonly failure: ClientFailure; readonly now: number },
  merge: Merge<P>,
): AutosaveState<P, B, C> {
  const { flight } = state;
  if (flight?.saveId !== event.saveId) return state;
  if (mayTryAgain(event.failure)) {
    const wait = Math.max(pauseAfter(flight.tries), askedWait(event.failure));
    return { ...state, failure: event.failure, flight: { ...flight, againAt: event.now + wait } };
  }
  return { ...state, failure: event.failure, flight: null, pending: returned(flight, state.pending, merge) };
}

function askedWait(failure: ClientFailure): number {
  return failure.kind === 'refused' ? (failure.problem.retryAfterSeconds ?? 0) * 1000 : 0;
}

/** What is to be done next and when; null while an answer or a decision is awaited, or nothing is left to do. */
export function nextStep<P, B, C>(
  state: AutosaveState<P, B, C>,
  timing: Timing,
): { readonly kind: 'send' | 'again'; readonly at: number } | null {
  if (state.conflict !== null) return null;
  if (state.flight !== null) return state.flight.againAt === null ? null : { kind: 'again', at: state.flight.againAt };
  if (state.pending === null || state.pending.lastAt === NEVER_SENT) return null;
  const { firstAt, lastAt } = state.pending;
  return { kind: 'send', at: Math.min(lastAt + timing.quietMs, firstAt + timing.longestMs) };
}

/** What the server has not acknowledged, newest first in each part; null when all is kept. */
export function unsentPayload<P, B, C>(state: AutosaveState<P, B, C>, merge: Merge<P>): P | null {
  const { flight, pending } = state;
  if (flight === null) return pending?.payload ?? null;
  return pending === null ? flight.payload : merge(flight.payload, pending.payload);
}

export type Standing =
  | { readonly kind: 'kept' | 'keeping' | 'conflict' }
  | { readonly kind: 'not-yet' | 'not-kept'; readonly why: string };

/** What the small line says. */
export function standingOf<P, B, C>(state: AutosaveState<P, B, C>): Standing {
  if (state.conflict !== null) return { kind: 'conflict' };
  if (state.failure !== null) {
    return mayTryAgain(state.failure)
      ? { kind: 'not-yet', why: shortWhy(state.failure) }
      : { kind: 'not-kept', why: state.failure.message };
  }
  return state.flight === null && state.pending === null ? { kind: 'kept' } : { kind: 'keeping' };
}

function shortWhy(failure: ClientFailure): string {
  if (failure.kind === 'offline') return 'no connection';
  return failure.kind === 'timeout' ? 'the server is slow to answer' : 'the server is busy';
}
