import type { RecipeDocument } from './document.ts';

/** A number of an example that differs between two documents; null where one of them has no such number. */
export interface NumberChange {
  readonly calculator: string;
  readonly example: string;
  readonly result: string;
  readonly label: string;
  readonly before: string | null;
  readonly after: string | null;
}

/** Gives every result of every example whose number, as it is shown, is not the same in both documents. */
export function compareDocuments(_before: RecipeDocument, _after: RecipeDocument): readonly NumberChange[] {
  throw new Error('recipe/compare is being written');
}
