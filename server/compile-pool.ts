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
  close(): Promise<void>;
}

/**
 * Compiles off the main thread, two texts at a time. The limit counts from when a text's turn comes; a thread that exceeds it is ended, and
 * the next text gets a new one. Answers are kept by text and facts.
 */
export function createCompilePool(script: URL, limitMs: number = COMPILE_LIMIT_MS): CompilePool {
  const pool = new Piscina({
    filename: fileURLToPath(script),
    minThreads: THREADS,
    maxThreads: THREADS,
    resourceLimits: { maxOldGenerationSizeMb: HEAP_MB },
    // Sources in TypeScript while developing and in tests; the build is JavaScript.
    execArgv: script.pathname.endsWith('.ts') ? ['--import', 'tsx'] : [],
  });
  const kept = new Map<string, Promise<Compiled>>();
  // The limit is for texts, not for starting threads on a busy machine: the first texts wait until the threads have compiled an empty one.
  const warmUp = (threads: number) =>
    Promise.allSettled(Array.from({ length: threads }, () => pool.run({ text: '', facts: {} })));
  let warm = warmUp(THREADS);
  const turns = createTurns(THREADS);

  async function compileNow(text: string, facts: CompileFacts): Promise<Compiled> {
    await turns.take();
    await warm;
    const stop = new AbortController();
    const timer = setTimeout(() => stop.abort(), limitMs);
    try {
      return await pool.run({ text, facts }, { signal: stop.signal });
    } catch (error) {
      if (stop.signal.aborted || isOutOfMemory(error)) {
        warm = warmUp(1);
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
    close: () => pool.destroy(),
  };
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
