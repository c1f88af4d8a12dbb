import type { Compiled, CompileFacts } from './document.ts';

/** Compiles a text; gives the same for the same text and facts, whatever it compiled before. */
export type Compiler = (text: string, facts: CompileFacts) => Compiled;

/** Compiles a recipe's text from nothing. Pure and synchronous; never throws, whatever the text. */
export function compileRecipe(_text: string, _facts: CompileFacts): Compiled {
  throw new Error('recipe/compile is being written');
}

/**
 * Makes a compiler that remembers its last text, for a page that is being written: after a change inside one attribute
 * only the calculator it stands in is built again. The answers are those of `compileRecipe`.
 */
export function createCompiler(): Compiler {
  return compileRecipe;
}
