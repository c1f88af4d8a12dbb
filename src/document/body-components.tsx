import { describeOutcome, type Outcome, type Sample } from '#calculator';
import { Caution } from '../ui/blocks.tsx';
import { useSurroundings } from './body-context.ts';
import type { BodyAttributes, BodyComponents, BodyProps } from './body-nodes.tsx';
import { CalculatorPanel } from './calculator-panel.tsx';
import { sectionsOf } from './headings.ts';
import { brokenUnder } from './key-result.ts';
import { Letter } from './letter.tsx';
import { notValidWords } from './result-rows.tsx';
import { WideTable } from './wide-table.tsx';

/** How the recipe's own elements and a few of HTML's are drawn; the rest is drawn as it is. */
export const BODY_COMPONENTS = {
  h2: SectionHeading,
  h3: PartHeading,
  table: ProseTable,
  a: ProseLink,
  input: TaskBox,
  'recipe-calculator': CalculatorPlace,
  'recipe-value': LiveValue,
  'recipe-link': RecipeLink,
  'recipe-caution': RecipeCaution,
  'recipe-note': RecipeNote,
} as const satisfies BodyComponents;

/** The compiler writes only what the element takes, so a missing text is one that the author left out. */
function textOf(attributes: BodyAttributes, name: string): string | undefined {
  const value = Object.hasOwn(attributes, name) ? attributes[name] : undefined;
  return value === undefined ? undefined : String(value);
}

function SectionHeading({ attributes, children }: BodyProps) {
  return (
    <h2 {...attributes}>
      <HeadingNumber id={textOf(attributes, 'id')} />
      {children}
    </h2>
  );
}

function PartHeading({ attributes, children }: BodyProps) {
  return (
    <h3 {...attributes}>
      <HeadingNumber id={textOf(attributes, 'id')} />
      {children}
    </h3>
  );
}

function HeadingNumber({ id }: { id: string | undefined }) {
  const { document } = useSurroundings();
  const section = sectionsOf(document).find((one) => one.id === id);
  return section ? <span className="section-number">{section.number} </span> : null;
}

function ProseTable({ attributes, children }: BodyProps) {
  return (
    <WideTable label="Table">
      <table {...attributes}>{children}</table>
    </WideTable>
  );
}

function ProseLink({ attributes, children }: BodyProps) {
  const isOutside = /^https?:/.test(textOf(attributes, 'href') ?? '');
  return (
    <a {...attributes} {...(isOutside ? { rel: 'noreferrer' } : {})}>
      {children}
    </a>
  );
}

/** A task list's box only says how the author left it. */
function TaskBox({ attributes }: BodyProps) {
  return <span role="img" aria-label={attributes.checked ? 'done' : 'not done'} className="task-box" />;
}

function CalculatorPlace({ attributes }: BodyProps) {
  const id = textOf(attributes, 'id') ?? '';
  const { calculators, document, panels } = useSurroundings();
  const state = calculators.byId.get(id);
  if (!state) return null;
  const { title, number } = document.front;
  if (panels === 'inline') {
    return <CalculatorPanel calculators={calculators} id={id} heading={number ? `${number} ${title}` : title} />;
  }
  return (
    <p className="calculator-place">
      <a href={`#calculator-${id}`}>{state.linked.model.title}</a>: the calculator of this page.
    </p>
  );
}

/** A live number in the prose, in ink like the words around it; what is not valid says so. */
function LiveValue({ attributes }: BodyProps) {
  const of = textOf(attributes, 'of') ?? '';
  const at = textOf(attributes, 'at');
  const { calculators } = useSurroundings();
  const dot = of.indexOf('.');
  const state = calculators.byId.get(of.slice(0, dot));
  const name = of.slice(dot + 1);
  const result = state?.linked.results.get(name)?.model;
  const outcome = state?.evaluation.outcomes[name];
  if (state && result && outcome) {
    const described = describeOutcome(endOf(outcome, at), result);
    const broken = brokenUnder(state.evaluation, name);
    return <LiveText text={described.words} broken={broken} isLastGood={state.isLastGood} />;
  }
  const field = state?.shown.fields.get(name);
  if (state && field) {
    const text = field.state === 'read' ? field.understood : 'no value';
    return <LiveText text={text} broken={[]} isLastGood={state.isLastGood} />;
  }
  return <Letter name={name} />;
}

function LiveText({ text, broken, isLastGood }: { text: string; broken: readonly string[]; isLastGood: boolean }) {
  return (
    <span className="live-value">
      {text}
      {broken.length > 0 && <small> ({notValidWords(broken)})</small>}
      {isLastGood && <small> (last good)</small>}
    </span>
  );
}

/** One end of a ranged outcome. Worst ends over tolerances come with a later release and read as the range's ends until then. */
function endOf(outcome: Outcome, at: string | undefined): Outcome {
  if (outcome.state !== 'known' || at === undefined) return outcome;
  const pick = (sample: Sample): Outcome => ({ state: 'known', middle: sample });
  if (at === 'middle') return pick(outcome.middle);
  if (!outcome.over) return outcome;
  return pick(at.endsWith('low') ? outcome.over.lowest : outcome.over.highest);
}

function RecipeLink({ attributes }: BodyProps) {
  const { recipeLink } = useSurroundings();
  const slug = textOf(attributes, 'slug') ?? '';
  const version = textOf(attributes, 'version');
  if (!recipeLink) return <span className="recipe-link">{slug.replaceAll('-', ' ')}</span>;
  return recipeLink(slug, version === undefined ? undefined : Number(version));
}

function RecipeCaution({ attributes, children }: BodyProps) {
  return <Caution title={capitalised(textOf(attributes, 'kind') ?? 'caution')}>{children}</Caution>;
}

function RecipeNote({ attributes, children }: BodyProps) {
  const kind = textOf(attributes, 'kind');
  return (
    <aside className="margin-note" aria-label={`Note: ${kind ?? 'remark'}`}>
      <b>{capitalised(kind ?? 'note')}.</b> {children}
    </aside>
  );
}

function capitalised(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}
