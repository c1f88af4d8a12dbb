import type { ReviewPage } from '#api';
import type { RecipeDocument } from '#recipe';

/** How many results of how many examples move: `2 of 7 results move, in 2 of 3 worked examples.` */
export function exampleWords(numbers: ReviewPage['numbers'], document: RecipeDocument): string {
  const results = document.calculators.reduce((sum, one) => sum + one.results.length, 0);
  const examples = document.calculators.reduce((sum, one) => sum + one.examples.length, 0);
  if (examples === 0) return 'There are no worked examples, so nothing shows what moves.';
  if (numbers.length === 0) return `No number of the ${counted(examples, 'worked example')} moves.`;
  const moved = new Set(numbers.map((one) => `${one.calculator} ${one.result}`)).size;
  const inExamples = new Set(numbers.map((one) => `${one.calculator} ${one.example}`)).size;
  return `${moved} of ${counted(results, 'result')} ${moved === 1 ? 'moves' : 'move'}, in ${inExamples} of ${counted(examples, 'worked example')}.`;
}

/** What happens to the designs that this person may see. */
export function designWords({ seen, unchanged, privateCount }: ReviewPage['designs']): string {
  const all = seen.length + unchanged;
  if (all === 0) return privateCount === 0 ? 'No design is affected.' : '';
  if (seen.length === 0) return `${counted(all, 'design')} would come out the same, digit for digit.`;
  const rest = unchanged === 0 ? '' : ` The other ${unchanged} would come out the same, digit for digit.`;
  return `${seen.length} of ${counted(all, 'design')} would move.${rest}`;
}

/** Designs of others that are theirs alone are counted and nothing more is told; null when none would move. */
export function privateWords({ privateCount, privateNewlyBroken }: ReviewPage['designs']): string | null {
  if (privateCount === 0) return null;
  const broken =
    privateNewlyBroken === 0 ? 'none of them would break a limit' : `${privateNewlyBroken} of them would break a limit`;
  return `And ${counted(privateCount, 'private design')} would move, ${broken}.`;
}

export function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`;
}
