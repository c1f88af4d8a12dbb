import type { CalculatorModel } from '#calculator';
import type { ShownDiagnostic } from '#text';

/** Rises with every change of what compiling gives; stored with each version. */
export const COMPILER_VERSION = 1;

export const HAZARDS = [
  'mains',
  'protective earth',
  'high voltage',
  'stored energy',
  'battery',
  'hot surface',
  'hearing',
] as const;
export type Hazard = (typeof HAZARDS)[number];

export type Supply = 'single' | 'split' | 'none';

export interface FrontMatter {
  readonly title: string;
  readonly summary: string;
  readonly slug: string;
  /** Empty for `hazards: [none]`. */
  readonly hazards: readonly Hazard[];
  readonly number?: string;
  readonly purpose?: string;
  readonly topics: readonly string[];
  readonly keywords: readonly string[];
  readonly supply?: Supply;
  readonly reviewMonths: number;
  readonly sources: Readonly<Record<string, string>>;
}

/**
 * The page as data: a HAST-shaped tree (https://github.com/syntax-tree/hast) whose `element` tags are HTML or MathML names from a fixed
 * list, or one of the recipe's own: `recipe-calculator` (id), `recipe-value` (of, at), `recipe-link` (slug, version), `recipe-caution`
 * (kind), `recipe-note` (kind). Headings carry ids. No raw HTML, no style, no event can stand in it.
 */
export type BodyNode = BodyText | BodyElement;
export interface BodyText {
  readonly type: 'text';
  readonly value: string;
}
export interface BodyElement {
  readonly type: 'element';
  readonly tagName: string;
  readonly properties: Readonly<Record<string, string | number | boolean | readonly (string | number)[]>>;
  readonly children: readonly BodyNode[];
  /** Offsets into the text, for following the cursor; absent on nodes that the compiler made. */
  readonly span?: { readonly start: number; readonly end: number };
}

/** A drawing, as written. Drawings are solved by a later release; the shape is fixed now so that stored documents do not change. */
export interface DrawingModel {
  readonly id: string;
  readonly title: string;
  readonly calculator?: string;
  readonly parts: readonly Readonly<Record<string, string>>[];
  readonly wires: readonly Readonly<Record<string, string>>[];
}

export interface RecipeDocument {
  readonly schema: 1;
  readonly compiler: number;
  readonly front: FrontMatter;
  readonly body: readonly BodyNode[];
  readonly calculators: readonly CalculatorModel[];
  readonly drawings: readonly DrawingModel[];
  readonly headings: readonly { readonly id: string; readonly depth: number; readonly text: string }[];
  readonly uses: readonly { readonly slug: string; readonly version?: number }[];
  readonly checks: readonly Check[];
  readonly proof: Proof;
}

/** One line of the checks panel and of the command line's JSON. */
export interface Check {
  readonly kind: 'dimensions' | 'example' | 'drawing' | 'caution';
  readonly title: string;
  readonly passed: boolean;
  readonly detail: string;
}

/** What the title block may claim. Counts, never a mark. */
export interface Proof {
  readonly formulas: number;
  readonly provenAgainstDrawing: number;
  readonly examples: number;
  readonly examplesPassed: number;
  /** Examples that pass and whose source is an entry of the front matter's `sources`. */
  readonly examplesFromOutside: number;
}

/** What the compiler cannot know by itself. A part that is absent is not checked, and the compiler says so (`not-checked-here`). */
export interface CompileFacts {
  /** Slug → versions that can be linked. */
  readonly recipes?: Readonly<Record<string, readonly number[]>>;
  /** Set where `recipes` is only a part of all: a slug it lacks is then not checked, instead of dead. */
  readonly recipesElsewhere?: true;
  readonly topics?: readonly string[];
  /** The slug that a first publication fixed. */
  readonly fixedSlug?: string;
  /** Volts of peak above which a hazard must be named; a team may lower the 42.4 V, not raise it. */
  readonly hazardVolts?: number;
}

export interface Compiled {
  /** Null while an error stands; the page then keeps its last good document. */
  readonly document: RecipeDocument | null;
  /** The document as far as it could be made, for the live page; null where MDX itself could not be read. */
  readonly preview: RecipeDocument | null;
  readonly diagnostics: readonly ShownDiagnostic[];
  readonly checks: readonly Check[];
}
