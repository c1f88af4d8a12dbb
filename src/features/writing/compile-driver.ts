import type { Compiled, CompileFacts } from '#recipe';
import type { CompileAnswer, CompileRequest } from './compile.worker.ts';

/** Quiet before a text is compiled, and the longest one text may take, in milliseconds. Source: measured, see stack notes. */
const QUIET_MS = 150;
const LIMIT_MS = 4000;

/** What became of the newest text. */
export type LiveAnswer =
  | { readonly kind: 'compiled'; readonly compiled: Compiled }
  | { readonly kind: 'too-slow' | 'no-worker' }
  | { readonly kind: 'fault'; readonly fault: string };

/** The part of a Worker that is used; tests bring their own. */
export interface CompileWorker {
  postMessage(request: CompileRequest): void;
  terminate(): void;
  onmessage: ((event: MessageEvent<CompileAnswer>) => void) | null;
  onerror: ((event: ErrorEvent) => void) | null;
}

export interface CompileDriver {
  readonly set: (text: string, facts: CompileFacts) => void;
  readonly stop: () => void;
}

/**
 * Compiles beside the page: one text at a time, the newest wins, an answer for a text that has moved on is dropped,
 * and a worker that takes longer than 4 s over a text is ended and replaced.
 */
export function createCompileDriver(
  makeWorker: () => CompileWorker,
  onAnswer: (answer: LiveAnswer) => void,
): CompileDriver {
  let worker: CompileWorker | null = null;
  let newest: CompileRequest | null = null;
  let flight: number | null = null;
  let version = 0;
  let isReady = false;
  let quiet: ReturnType<typeof setTimeout> | undefined;
  let guard: ReturnType<typeof setTimeout> | undefined;

  function end(): void {
    clearTimeout(guard);
    worker?.terminate();
    worker = null;
    isReady = false;
    flight = null;
  }

  function started(): CompileWorker {
    const made = makeWorker();
    made.onmessage = ({ data }) => {
      if ('ready' in data) {
        isReady = true;
        if (flight !== null) watch(flight);
        return;
      }
      if (data.version !== flight) return;
      clearTimeout(guard);
      flight = null;
      tell(
        data.version,
        'fault' in data ? { kind: 'fault', fault: data.fault } : { kind: 'compiled', compiled: data.compiled },
      );
    };
    made.onerror = () => {
      const failed = flight;
      end();
      tell(failed, { kind: 'no-worker' });
    };
    return made;
  }

  function tell(answered: number | null, answer: LiveAnswer): void {
    if (answered === version) onAnswer(answer);
    compileNewest();
  }

  /** The time that a text takes, without that of loading the worker, which a slow line may stretch. */
  function watch(sent: number): void {
    guard = setTimeout(() => {
      end();
      tell(sent, { kind: 'too-slow' });
    }, LIMIT_MS);
  }

  function compileNewest(): void {
    if (flight !== null || newest === null) return;
    worker ??= started();
    flight = newest.version;
    if (isReady) watch(flight);
    worker.postMessage(newest);
    newest = null;
  }

  return {
    set(text, facts) {
      version++;
      const request = { version, text, facts };
      clearTimeout(quiet);
      quiet = setTimeout(
        () => {
          newest = request;
          compileNewest();
        },
        version === 1 ? 0 : QUIET_MS,
      );
    },
    stop() {
      clearTimeout(quiet);
      newest = null;
      end();
    },
  };
}
