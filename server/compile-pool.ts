import { createHash } from 'node:crypto';
import { fileURLToPath } from 'node:url';
import { Piscina } from 'piscina';
import type { Compiled, CompileFacts } from '#recipe';

/** Longest time one text may take, in milliseconds. The worst texts within the language's limits were measured at about 1 s. */
export const COMPILE_LIMIT_MS = 4000;
/** Compiled texts kept: a few hundred kilobytes each at most. */
const KEPT = 100;
const THREADS = 2;
const HEAP_MB = 256;

export interface CompilePool {
  compile(text: string, facts: CompileFacts): Promise<Compiled>;
  /** Starts the threads before the first text comes. */
  warm(): void;
  close(): Promise<void>;
}

/**
 * Compiles off the main thread, two texts at a time. The limit counts from when a text's turn comes; a thread that exceeds it is ended, and
 * the next text gets a new one. Answers are kept by text and facts. What goes wrong in a thread that nobody waits for is reported.
 */
export function createCompilePool(
  script: URL,
  report: (error: Error) => void,
  limitMs: number = COMPILE_LIMIT_MS,
): CompilePool {
  // Not before they are asked for: a server that starts has other work for its processors.
  let started: Threads | undefined;
  const threads = () => {
    started ??= startThreads(script, report);
    return started;
  };
  const kept = new Map<string, Promise<Compiled>>();
  const turns = createTurns(THREADS);

  async function compileNow(text: string, facts: CompileFacts): Promise<Compiled> {
    await turns.take();
    const { pool, warmUp } = threads();
    await threads().warm;
    const stop = new AbortController();
    const timer = setTimeout(() => stop.abort(), limitMs);
    try {
      return await pool.run({ text, facts }, { signal: stop.signal });
    } catch (error) {
      if (stop.signal.aborted || isOutOfMemory(error)) {
        started = { pool, warmUp, warm: warmUp(1) };
        return tooSlow(limitMs);
      }
      throw error;
    } finally {
      clearTimeout(timer);
      turns.give();
    }
  }

  return {
    compile(text, facts) {
      const key = createHash('sha256').update(text).update('\0').update(JSON.stringify(facts)).digest('base64');
      const known = kept.get(key);
      if (known) return known;
      const compiled = compileNow(text, facts);
      keep(kept, key, compiled);
      return compiled;
    },
    warm: () => void threads(),
    close: async () => started?.pool.destroy(),
  };
}

interface Threads {
  readonly pool: Piscina;
  /** The limit is for texts, not for starting threads on a busy machine: texts wait until the threads have compiled an empty one. */
  readonly warm: Promise<unknown>;
  readonly warmUp: (threads: number) => Promise<unknown>;
}

function startThreads(script: URL, report: (error: Error) => void): Threads {
  const pool = new Piscina({
    // Sources in TypeScript while developing and in tests; the build is JavaScript.
    filename: fileURLToPath(script.pathname.endsWith('.ts') ? new URL('./source-thread.mjs', import.meta.url) : script),
    workerData: { script: script.href },
    minThreads: THREADS,
    maxThreads: THREADS,
    resourceLimits: { maxOldGenerationSizeMb: HEAP_MB },
  });
  // A thread that was ended for its time may still run out of memory on its way out: nobody waits for it, and without a listener the
  // process would end.
  pool.on('error', report);
  const warmUp = (threads: number) =>
    Promise.allSettled(Array.from({ length: threads }, () => pool.run({ text: '', facts: {} })));
  return { pool, warmUp, warm: warmUp(THREADS) };
}

/** Keeps an answer, the oldest making room; what the limit cut off or a fault ended is forgotten, so that the next try compiles. */
function keep(kept: Map<string, Promise<Compiled>>, key: string, compiled: Promise<Compiled>): void {
  kept.set(key, compiled);
  const [oldest] = kept.keys();
  if (kept.size > KEPT && oldest !== undefined) kept.delete(oldest);
  compiled.then(
    (value) => {
      if (value.diagnostics[0]?.code === TOO_SLOW) kept.delete(key);
    },
    () => kept.delete(key),
  );
}

const TOO_SLOW = 'too-slow';

function tooSlow(limitMs: number): Compiled {
  const start = { line: 1, column: 1, offset: 0 };
  const message = `The text takes longer than ${limitMs / 1000} s to compile, but it needs to take less.`;
  const hint = 'Shorten the text, or split it into two recipes.';
  const diagnostic = { severity: 'error', code: TOO_SLOW, message, hint, start, end: start } as const;
  return { document: null, preview: null, diagnostics: [diagnostic], checks: [] };
}

function isOutOfMemory(error: unknown): boolean {
  return error instanceof Error && 'code' in error && error.code === 'ERR_WORKER_OUT_OF_MEMORY';
}

function createTurns(count: number): { take(): Promise<void>; give(): void } {
  let free = count;
  const waiting: (() => void)[] = [];
  return {
    take() {
      if (free === 0) return new Promise((resolve) => waiting.push(resolve));
      free--;
      return Promise.resolve();
    },
    give() {
      const next = waiting.shift();
      if (next) next();
      else free++;
    },
  };
}
