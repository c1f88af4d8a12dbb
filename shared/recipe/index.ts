/**
 * A recipe's text becomes a document: plain data that pages, print, search and the command line read.
 * Terms: front matter, document, body, check, proof, compile facts.
 */
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
