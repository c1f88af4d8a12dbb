/** What an element may hold between its tags. */
export type Holds = 'nothing' | 'elements' | 'prose' | 'words';

/** How the text of an attribute is read. */
export type AttributeReader =
  | 'text'
  | 'id'
  | 'name'
  | 'names'
  | 'quantity'
  | 'quantity-kind'
  | 'value'
  | 'formula'
  | 'measure'
  | 'choice'
  | 'number'
  | 'reference';

export interface AttributeRow {
  readonly reader: AttributeReader;
  readonly required?: true;
  /** The words that may stand, for `choice`. */
  readonly values?: readonly string[];
  /** Read, but not available in this release. */
  readonly later?: true;
  readonly help: string;
}

export interface ElementRow {
  readonly holds: Holds;
  /** The element it must stand in; null for the page itself. */
  readonly inside: readonly string[] | null;
  readonly later?: true;
  readonly help: string;
  readonly attributes: Readonly<Record<string, AttributeRow>>;
}

/** Every element of the language. The compiler, completion and the language guide read this one table. */
export const ELEMENTS: Readonly<Record<string, ElementRow>> = {};
