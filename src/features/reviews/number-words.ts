import type { ReviewPage } from '#api';
import type { RecipeDocument } from '#recipe';

/** How many results move, and where: `2 of 7 results move, at the recipe’s own values and in 2 of 3 worked examples.` */
export function exampleWords(numbers: ReviewPage['numbers'], before: RecipeDocument, after: RecipeDocument): string {
  const results = after.calculators.reduce((sum, one) => sum + one.results.length, 0);
  const examples = after.calculators.reduce((sum, one) => sum + one.examples.length, 0);
  const looked = examples === 0 ? '' : ` and in ${counted(examples, 'worked example')}`;
  if (numbers.length === 0) return `No result moves, at the recipe’s own values${looked}.`;
  const moved = new Set(numbers.map((one) => `${one.calculator} ${one.result}`)).size;
  const inExamples = numbers.filter((one) => hasExample(before, one) || hasExample(after, one));
  const titles = new Set(inExamples.map((one) => `${one.calculator} ${one.example}`)).size;
  const where = [
    ...(inExamples.length < numbers.length ? ['at the recipe’s own values'] : []),
    ...(titles > 0 ? [`in ${titles} of ${counted(examples, 'worked example')}`] : []),
  ];
  return `${moved} of ${counted(results, 'result')} ${moved === 1 ? 'moves' : 'move'}, ${where.join(' and ')}.`;
}

/** Whether a number belongs to a worked example of this document; else it stands at the recipe's own values. */
export function hasExample(
  { calculators }: RecipeDocument,
  { calculator, example }: Pick<ReviewPage['numbers'][number], 'calculator' | 'example'>,
): boolean {
  return calculators.some((one) => one.id === calculator && one.examples.some((each) => each.title === example));
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
  if (privateCount === 1) {
    return `And 1 private design would move, ${privateNewlyBroken === 1 ? 'and a limit would break in it' : 'breaking no limit'}.`;
  }
  const broken =
    privateNewlyBroken === 0 ? 'none of them would break a limit' : `${privateNewlyBroken} of them would break a limit`;
  return `And ${privateCount} private designs would move, ${broken}.`;
}

/** The ends of a range in words, `0.245 to 4.235 V`: after a number, its unit or one of the words for an end. */
const RANGE_IN_WORDS = /^((?:−?\d|above \d|below −\d|unbounded\b)[^:,]*?) to (?=−?\d|above |below |unbounded)/;

/** Writes a range as results do everywhere, `0.245 … 4.235 V`; leaves every other text as it is. */
export function withRangeSign(text: string): string {
  return text.replace(RANGE_IN_WORDS, '$1 … ');
}

export function counted(count: number, noun: string): string {
  return `${count} ${noun}${count === 1 ? '' : 's'}`;
}
