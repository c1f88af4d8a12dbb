import { readFileSync } from 'node:fs';
import { compileRecipe, type RecipeDocument } from '#recipe';

const compiled = new Map<string, RecipeDocument>();

/** A starter recipe's document, compiled from its text as the server does it; once for a test file. */
export function starterDocument(slug: string): RecipeDocument {
  const before = compiled.get(slug);
  if (before) return before;
  const text = readFileSync(`content/${slug}.mdx`, 'utf8');
  return remember(slug, compileText(text));
}

/** Compiles a text that a test wrote; a text with errors is a mistake of the test. */
export function compileText(text: string): RecipeDocument {
  const { document, diagnostics } = compileRecipe(text, {});
  if (document === null) {
    throw new Error(diagnostics.map(({ start, message }) => `${start.line}:${start.column} ${message}`).join('\n'));
  }
  return document;
}

function remember(slug: string, document: RecipeDocument): RecipeDocument {
  compiled.set(slug, document);
  return document;
}
