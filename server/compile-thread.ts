import { type CompileFacts, compileRecipe } from '#recipe';

/** Runs in a thread of the pool. */
export default function compileInThread({ text, facts }: { text: string; facts: CompileFacts }) {
  return compileRecipe(text, facts);
}
