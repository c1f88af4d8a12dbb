import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { createAutosave, type Kept } from '../../src/lib/autosave-driver.ts';
import { withoutAnswer } from '../../src/lib/failure.ts';

type Save = {
  readonly saveId: string;
  readonly payload: string;
  readonly base: number;
  readonly keepalive: boolean;
};

function server(mayOverlap = false) {
  const saves: Save[] = [];
  const answers: ((kept: Kept<number, string>) => void)[] = [];
  const remembered: (string | null)[] = [];
  const saver = createAutosave<string, number, string>({
    base: 1,
    timing: { quietMs: 1000, longestMs: 5000 },
    merge: (_older, newer) => newer,
    mayOverlap,
    remember: (payload) => remembered.push(payload),
    send: (save) => {
      saves.push(save);
      return new Promise((answer) => answers.push(answer));
    },
  });
  const answer = async (kept: Kept<number, string>) => {
    answers.shift()?.(kept);
    await vi.advanceTimersByTimeAsync(0);
  };
  return { saver, saves, answer, remembered };
}

beforeEach(() => {
  vi.useFakeTimers({ toFake: ['setTimeout', 'clearTimeout', 'Date'] });
});
afterEach(() => {
  vi.useRealTimers();
});

describe('the driver of autosave', () => {
  test('remembers in the browser at once, sends after a second, and forgets when it is acknowledged', async () => {
    const { saver, saves, answer, remembered } = server();
    saver.change('a');
    expect(remembered).toEqual(['a']);
    await vi.advanceTimersByTimeAsync(999);
    expect(saves).toHaveLength(0);
    await vi.advanceTimersByTimeAsync(1);
    expect(saves).toMatchObject([{ payload: 'a', base: 1, keepalive: false }]);
    await answer({ kind: 'kept', base: 2 });
    expect(remembered).toEqual(['a', null]);
  });

  test('repeats a save whose answer was lost with the id it had', async () => {
    const { saver, saves, answer } = server();
    saver.change('a');
    await vi.advanceTimersByTimeAsync(1000);
    await answer({ kind: 'failed', failure: withoutAnswer('offline') });
    saver.change('ab');
    await vi.advanceTimersByTimeAsync(1000);
    expect(saves).toHaveLength(2);
    expect(saves[1]).toEqual(saves[0]);
    await answer({ kind: 'kept', base: 2 });
    await vi.advanceTimersByTimeAsync(1000);
    expect(saves[2]).toMatchObject({ payload: 'ab', base: 2 });
    expect(saves[2]?.saveId).not.toBe(saves[0]?.saveId);
  });

  test('tries at once when the connection is back', async () => {
    const { saver, saves, answer } = server();
    const detach = saver.attach();
    saver.change('a');
    await vi.advanceTimersByTimeAsync(1000);
    await answer({ kind: 'failed', failure: withoutAnswer('offline') });
    window.dispatchEvent(new Event('online'));
    expect(saves).toHaveLength(2);
    detach();
  });

  test('sends with keepalive when the page goes before the pause is over', () => {
    const { saver, saves } = server();
    const detach = saver.attach();
    saver.change('a');
    window.dispatchEvent(new Event('pagehide'));
    expect(saves).toMatchObject([{ payload: 'a', keepalive: true }]);
    detach();
  });

  test('sends a second save beside the first when the page goes only where the last to arrive wins', async () => {
    for (const [mayOverlap, expected] of [
      [true, ['a', 'ab']],
      [false, ['a']],
    ] as const) {
      const { saver, saves } = server(mayOverlap);
      const detach = saver.attach();
      saver.change('a');
      await vi.advanceTimersByTimeAsync(1000);
      saver.change('ab');
      window.dispatchEvent(new Event('pagehide'));
      expect(saves.map((save) => save.payload)).toEqual(expected);
      detach();
    }
  });

  test('settles when all is kept, having sent what waited at once', async () => {
    const { saver, saves, answer } = server();
    saver.change('a');
    const settled = saver.settle();
    expect(saves).toHaveLength(1);
    saver.change('ab');
    await answer({ kind: 'kept', base: 2 });
    expect(saves).toHaveLength(2);
    await answer({ kind: 'kept', base: 3 });
    expect(await settled).toMatchObject({ base: 3, pending: null, flight: null });
  });

  test('settles with the conflict when the draft has moved', async () => {
    const { saver, answer } = server();
    saver.change('a');
    const settled = saver.settle();
    await answer({ kind: 'conflict', conflict: 'theirs' });
    expect(await settled).toMatchObject({ conflict: 'theirs', pending: { payload: 'a' } });
  });
});
