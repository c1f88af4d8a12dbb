/**
 * A recipe's text becomes a document: plain data that pages, print, search and the command line read.
 * Terms: front matter, document, body, element, check, proof, compile facts.
 * Opens all rooms below it. Only parse-mdx.ts knows the MDX packages; nothing is built when a file is loaded, so a page
 * that opens this door for a name or a table does not carry them.
 */
export { compareDocuments, type NumberChange } from './compare.ts';
export { type Compiler, compileRecipe, createCompiler } from './compile.ts';
export {
  type BodyElement,
  type BodyNode,
  type BodyText,
  type Check,
  COMPILER_VERSION,
  type Compiled,
  type CompileFacts,
  type DrawingModel,
  type FrontMatter,
  HAZARDS,
  type Hazard,
  type Proof,
  type RecipeDocument,
  type Supply,
} from './document.ts';
export { type AttributeReader, type AttributeRow, ELEMENTS, type ElementRow, type Holds } from './elements.ts';
export { type SearchText, searchText } from './search-text.ts';
export { describeDiagnostic } from './wording.ts';
