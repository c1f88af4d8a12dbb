import { describe, expect, test } from 'vitest';
import {
  type AutosaveEvent,
  type AutosaveState,
  advance,
  nextStep,
  pauseAfter,
  standingOf,
  startOf,
  unsentPayload,
} from '../../src/lib/autosave.ts';
import { refusalOf, withoutAnswer } from '../../src/lib/failure.ts';

type Conflict = { readonly revision: number; readonly text: string };
type State = AutosaveState<string, number, Conflict>;
type Event = AutosaveEvent<string, number, Conflict>;

const newest = (_older: string, newer: string) => newer;
const TIMING = { quietMs: 1000, longestMs: 5000 };

function stateAfter(...events: readonly Event[]): State {
  return events.reduce<State>((state, event) => advance(state, event, newest), startOf(7));
}
const typed = (payload: string, now: number): Event => ({ kind: 'changed', payload, now });
const lost = (saveId: string, now: number): Event => ({
  kind: 'failed',
  saveId,
  failure: withoutAnswer('offline'),
  now,
});

describe('when a change is sent', () => {
  test('it waits for a quiet second after the last key', () => {
    const state = stateAfter(typed('a', 100), typed('ab', 900));
    expect(nextStep(state, TIMING)).toEqual({ kind: 'send', at: 1900 });
  });

  test('it waits five seconds at most while keys keep coming', () => {
    const state = stateAfter(...[0, 900, 1800, 2700, 3600, 4500].map((now) => typed(`at ${now}`, now)));
    expect(nextStep(state, TIMING)).toEqual({ kind: 'send', at: 5000 });
  });

  test('one save is in flight at a time, and what is typed meanwhile waits', () => {
    const state = stateAfter(typed('a', 0), { kind: 'send', saveId: 's1' }, typed('ab', 10), {
      kind: 'send',
      saveId: 's2',
    });
    expect(state.flight?.saveId).toBe('s1');
    expect(state.pending?.payload).toBe('ab');
    expect(nextStep(state, TIMING)).toBeNull();
  });

  test('an acknowledged save gives the base of the next one', () => {
    const state = stateAfter(
      typed('a', 0),
      { kind: 'send', saveId: 's1' },
      typed('ab', 10),
      { kind: 'kept', saveId: 's1', base: 8 },
      { kind: 'send', saveId: 's2' },
    );
    expect(state.flight).toMatchObject({ saveId: 's2', payload: 'ab', base: 8 });
  });
});

describe('a lost answer', () => {
  const state = stateAfter(typed('a', 0), { kind: 'send', saveId: 's1' }, typed('ab', 10), lost('s1', 2000));

  test('is asked for again under the same id, with the same contents and base, before anything newer', () => {
    expect(nextStep(state, TIMING)).toEqual({ kind: 'again', at: 3000 });
    const again = advance(state, { kind: 'again' }, newest);
    expect(again.flight).toMatchObject({ saveId: 's1', payload: 'a', base: 7, tries: 2 });
    expect(again.pending?.payload).toBe('ab');
  });

  test('is asked for with growing pauses that end at half a minute', () => {
    expect([1, 2, 3, 4, 5, 6, 7, 50].map(pauseAfter)).toEqual([1000, 2000, 4000, 8000, 15_000, 30_000, 30_000, 30_000]);
  });

  test('keeps what is unsent, and the line says that there is no connection', () => {
    expect(unsentPayload(state, newest)).toBe('ab');
    expect(standingOf(state)).toEqual({ kind: 'not-yet', why: 'no connection' });
  });

  test('is over when the repeat is acknowledged', () => {
    const kept = advance(advance(state, { kind: 'again' }, newest), { kind: 'kept', saveId: 's1', base: 8 }, newest);
    expect(kept).toMatchObject({ base: 8, flight: null, failure: null });
    expect(standingOf(kept)).toEqual({ kind: 'keeping' });
  });
});

describe('an answer that comes late', () => {
  test('for another save than the one in flight changes nothing', () => {
    const state = stateAfter(typed('a', 0), { kind: 'send', saveId: 's2' });
    expect(advance(state, { kind: 'kept', saveId: 's1', base: 99 }, newest)).toBe(state);
    expect(advance(state, lost('s1', 5), newest)).toBe(state);
  });
});

describe('a refusal', () => {
  const forbidden = refusalOf(403, { code: 'forbidden', detail: 'You were taken off this draft.' }, new Headers());

  test('is not sent again by itself, and the text is not lost', () => {
    const state = stateAfter(
      typed('a', 0),
      { kind: 'send', saveId: 's1' },
      { kind: 'failed', saveId: 's1', failure: forbidden, now: 1 },
    );
    expect(nextStep(state, TIMING)).toBeNull();
    expect(unsentPayload(state, newest)).toBe('a');
    expect(standingOf(state)).toEqual({ kind: 'not-kept', why: 'You were taken off this draft.' });
  });

  test('is tried again with the next change', () => {
    const state = stateAfter(
      typed('a', 0),
      { kind: 'send', saveId: 's1' },
      { kind: 'failed', saveId: 's1', failure: forbidden, now: 1 },
      typed('ab', 100),
    );
    expect(nextStep(state, TIMING)).toEqual({ kind: 'send', at: 1100 });
  });

  test('that names a wait is repeated after that wait', () => {
    const busy = refusalOf(429, { code: 'too-many', retryAfterSeconds: 20 }, new Headers());
    const state = stateAfter(
      typed('a', 0),
      { kind: 'send', saveId: 's1' },
      { kind: 'failed', saveId: 's1', failure: busy, now: 1000 },
    );
    expect(nextStep(state, TIMING)).toEqual({ kind: 'again', at: 21_000 });
  });
});

describe('a conflict', () => {
  const conflict = { revision: 9, text: 'theirs' };
  const state = stateAfter(
    typed('a', 0),
    { kind: 'send', saveId: 's1' },
    typed('ab', 10),
    { kind: 'conflicted', saveId: 's1', conflict },
    typed('abc', 20),
  );

  test('stops sending and holds both texts', () => {
    expect(nextStep(state, TIMING)).toBeNull();
    expect(state.conflict).toEqual(conflict);
    expect(unsentPayload(state, newest)).toBe('abc');
  });

  test('ends with what the person decides to keep, on the newer base', () => {
    const resolved = advance(state, { kind: 'resolved', base: 9, payload: 'both', now: 50 }, newest);
    expect(resolved).toMatchObject({ base: 9, conflict: null, pending: { payload: 'both' } });
    expect(nextStep(resolved, TIMING)).toEqual({ kind: 'send', at: 1050 });
  });

  test('ends with nothing to send when the person takes the other text', () => {
    const resolved = advance(state, { kind: 'resolved', base: 9, payload: null, now: 50 }, newest);
    expect(nextStep(resolved, TIMING)).toBeNull();
    expect(standingOf(resolved)).toEqual({ kind: 'kept' });
  });
});

describe('kept inputs, whose fields are joined', () => {
  type Fields = Readonly<Record<string, string>>;
  const joined = (older: Fields, newer: Fields): Fields => ({ ...older, ...newer });

  test('a field typed before and one typed during a flight are both unsent', () => {
    let state = startOf<Fields, null, never>(null);
    state = advance(state, { kind: 'changed', payload: { V_d: '2 V' }, now: 0 }, joined);
    state = advance(state, { kind: 'send', saveId: 's1' }, joined);
    state = advance(state, { kind: 'changed', payload: { R_1: '10k' }, now: 10 }, joined);
    state = advance(state, { kind: 'changed', payload: { R_1: '12k' }, now: 20 }, joined);
    expect(unsentPayload(state, joined)).toEqual({ V_d: '2 V', R_1: '12k' });
  });
});
