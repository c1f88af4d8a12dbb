import type { RecipeDocument } from '#recipe';

/** What was proven and what not, in sentences. Nothing here claims more than was counted. */
export function proofWords({ proof, drawings }: RecipeDocument): readonly string[] {
  return [formulaWords(proof.formulas), drawingWords(proof, drawings.length), exampleWords(proof), NOT_COVERED];
}

const NOT_COVERED = 'Nothing here covers stability, saturation or noise beyond what the formulas say.';

function formulaWords(formulas: number): string {
  if (formulas === 0) return 'There is no formula to check.';
  return formulas === 1 ? 'Its formula agrees in units.' : `All ${formulas} formulas agree in units.`;
}

function drawingWords({ formulas, provenAgainstDrawing }: RecipeDocument['proof'], drawings: number): string {
  if (drawings === 0) return 'No formula is proven against a drawing: there is none.';
  return `${provenAgainstDrawing} of ${formulas} formulas are proven against the drawing, for ideal op amps.`;
}

function exampleWords({ examples, examplesPassed, examplesFromOutside }: RecipeDocument['proof']): string {
  if (examples === 0) return 'There are no worked examples.';
  const outside =
    examplesFromOutside === 0
      ? 'none of them from an outside source'
      : `${examplesFromOutside} of them from outside sources`;
  return `${examplesPassed} of ${examples} worked examples agree, ${outside}.`;
}

/** For the title block: a count, and what it does not say. */
export function formulaCell({ proof, drawings }: RecipeDocument): { readonly main: string; readonly note: string } {
  const main = proof.formulas === 0 ? 'none' : `${proof.formulas} agree in units`;
  const note =
    drawings.length === 0 ? 'not proven on a drawing' : `${proof.provenAgainstDrawing} proven on the drawing`;
  return { main, note };
}
