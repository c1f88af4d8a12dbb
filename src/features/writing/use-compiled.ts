import { useEffect, useRef, useState } from 'react';
import type { Check, CompileFacts, RecipeDocument } from '#recipe';
import type { ShownDiagnostic } from '#text';
import { type CompileDriver, type CompileWorker, createCompileDriver, type LiveAnswer } from './compile-driver.ts';

export interface LiveCompiled {
  /** The newest page that could be drawn. */
  readonly document: RecipeDocument | null;
  /** Why `document` is an older one; null while it is that of the text. */
  readonly older: string | null;
  readonly diagnostics: readonly ShownDiagnostic[];
  readonly checks: readonly Check[];
  /** Whether any text was answered for yet. */
  readonly isRead: boolean;
  /** Whether the answer belongs to the text as it stands now. */
  readonly isFresh: boolean;
  /** Nothing that keeps it from being sent: it compiles, no error, every check passed. */
  readonly isClean: boolean;
}

const NOTHING: LiveCompiled = {
  document: null,
  older: null,
  diagnostics: [],
  checks: [],
  isRead: false,
  isFresh: false,
  isClean: false,
};

export function newCompileWorker(): CompileWorker {
  return new Worker(new URL('./compile.worker.ts', import.meta.url), { type: 'module' });
}

/** The text compiled beside the page, a moment after the last key. */
export function useCompiled(
  text: string,
  facts: CompileFacts,
  makeWorker: () => CompileWorker = newCompileWorker,
): LiveCompiled {
  const [live, setLive] = useState(NOTHING);
  const driver = useRef<CompileDriver | null>(null);
  useEffect(() => {
    const made = createCompileDriver(makeWorker, (answer) => setLive((before) => withAnswer(before, answer)));
    driver.current = made;
    return () => {
      driver.current = null;
      made.stop();
    };
  }, [makeWorker]);
  useEffect(() => {
    setLive((before) => (before.isFresh ? { ...before, isFresh: false } : before));
    driver.current?.set(text, facts);
  }, [text, facts]);
  return live;
}

/** The state after an answer: what cannot be read keeps the last good page, and says so. */
export function withAnswer(before: LiveCompiled, answer: LiveAnswer): LiveCompiled {
  if (answer.kind !== 'compiled') {
    return { ...before, older: NO_ANSWER[answer.kind], isRead: true, isFresh: true, isClean: false };
  }
  const { document, preview, diagnostics, checks } = answer.compiled;
  const page = document ?? preview;
  return {
    document: page ?? before.document,
    older: page === null ? unreadable(diagnostics) : null,
    diagnostics,
    checks,
    isRead: true,
    isFresh: true,
    isClean: document !== null && diagnostics.every((d) => d.severity !== 'error') && checks.every((c) => c.passed),
  };
}

const NO_ANSWER = {
  'too-slow': 'This text takes longer than 4 s to read. Shorten it, or split it into two recipes.',
  'no-worker': 'The live page could not be started. Reload the page; your text is kept.',
  fault: 'The live page met a fault of the program. Your text is kept; change it, and the page is tried again.',
} as const satisfies Record<Exclude<LiveAnswer['kind'], 'compiled'>, string>;

function unreadable(diagnostics: readonly ShownDiagnostic[]): string {
  const first = diagnostics.find((each) => each.severity === 'error');
  return first === undefined
    ? 'The text cannot be read yet.'
    : `The text cannot be read past line ${first.start.line}.`;
}
