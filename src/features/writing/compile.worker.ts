import { type Compiled, type CompileFacts, createCompiler } from '#recipe';

export interface CompileRequest {
  /** Counts the texts; the answer carries it back. */
  readonly version: number;
  readonly text: string;
  readonly facts: CompileFacts;
}

export type CompileAnswer =
  /** Loaded: from now on the time of a text counts. */
  | { readonly ready: true }
  | { readonly version: number; readonly compiled: Compiled }
  | { readonly version: number; readonly fault: string };

const compile = createCompiler();
self.postMessage({ ready: true } satisfies CompileAnswer);

/** One of the four places where a fault of ours is caught: the page says so, and the next text is compiled again. */
self.onmessage = ({ data }: MessageEvent<CompileRequest>) => {
  self.postMessage(answerTo(data));
};

function answerTo({ version, text, facts }: CompileRequest): CompileAnswer {
  try {
    return { version, compiled: compile(text, facts) };
  } catch (error) {
    return { version, fault: String(error) };
  }
}
