import { useQuery } from '@tanstack/react-query';
import { type FormEvent, useId, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { request } from '../../lib/client.ts';
import { paths } from '../../lib/paths.ts';
import { type ActParts, useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { SelectField, TextField } from '../../ui/field.tsx';
import { frontValue, retitled, slugOf } from './front-text.ts';
import { type PastedGiven, recipeOfGivens } from './pasted-list.ts';
import { PastedListForm } from './pasted-list-form.tsx';
import { recipesReading } from './queries.ts';
import { SKELETONS } from './skeletons.ts';

/** `skeleton:…`, a change of a recipe, another recipe from its text, or a pasted list. */
type Way = `skeleton:${string}` | 'change' | 'from' | 'list';
type Body = ActParts<'drafts.start'>['body'];

export function StartForm({ from }: { from: string | null }) {
  const start = useAct('drafts.start', ['drafts.list']);
  const recipes = useQuery(recipesReading);
  const navigate = useNavigate();
  const group = useId();
  const [way, setWay] = useState<Way>(from === null ? `skeleton:${SKELETONS[0]?.id ?? ''}` : 'change');
  const [slug, setSlug] = useState(from ?? '');
  const [title, setTitle] = useState('');
  const [givens, setGivens] = useState<readonly PastedGiven[]>([]);
  const [failure, setFailure] = useState<string | null>(null);
  const [isReading, setReading] = useState(false);
  const isFromRecipe = way === 'change' || way === 'from';
  const options = (recipes.data?.recipes ?? []).map((recipe) => ({
    value: recipe.slug,
    label: `${recipe.number} ${recipe.title}`,
  }));
  const chosen = slug || options[0]?.value || '';
  const cannot =
    way === 'list' && givens.length === 0
      ? 'Paste at least one line that can be read.'
      : isFromRecipe && chosen === ''
        ? 'No recipe is published yet.'
        : undefined;

  const refuse = (words: string) => {
    setFailure(words);
    announce(`Not started. ${words}`, 'assertive');
  };
  const begin = async (event: FormEvent) => {
    event.preventDefault();
    if (cannot !== undefined || start.isActing || isReading) return;
    setFailure(null);
    setReading(true);
    const body = await bodyFor(way, chosen, title.trim(), givens);
    setReading(false);
    if (typeof body === 'string') return refuse(body);
    const answer = await start.act({ body });
    if (!answer.ok) return refuse(answer.error.message);
    if (answer.value.already) announce('This recipe has an open change already; here it is.');
    await navigate(paths.write(answer.value.id));
  };
  const choice = (value: Way, label: string, note: string) => (
    <label key={value} className="check start-way">
      <input type="radio" name={group} value={value} checked={way === value} onChange={() => setWay(value)} />
      <span>
        {label}
        <span className="note block">{note}</span>
      </span>
    </label>
  );
  return (
    <form noValidate onSubmit={(event) => void begin(event)} className="start-form">
      <fieldset>
        <legend className="lab">Start from</legend>
        <div className="start-ways">
          {SKELETONS.map((skeleton) => choice(`skeleton:${skeleton.id}`, skeleton.title, skeleton.summary))}
          {choice('list', 'A pasted list', 'Lines such as R1 = 10k become inputs.')}
          {choice('change', 'A change of a recipe', 'Becomes its next version when it is signed off.')}
          {choice('from', 'Another recipe from one', 'Its text, under a new name.')}
        </div>
      </fieldset>
      {isFromRecipe && options.length > 0 && (
        <SelectField
          label={way === 'change' ? 'Recipe to change' : 'Recipe to start from'}
          options={options}
          value={chosen}
          onChange={(event) => setSlug(event.target.value)}
        />
      )}
      {recipes.isError && isFromRecipe && (
        <Failure lead="The list of recipes was not read." onAgain={() => void recipes.refetch()}>
          {recipes.error.message}
        </Failure>
      )}
      {way === 'list' && <PastedListForm onChange={setGivens} />}
      {way !== 'change' && (
        <TextField
          label="Title of your recipe"
          optional
          maxLength={120}
          hint="It can be changed while you write."
          value={title}
          onChange={(event) => setTitle(event.target.value)}
        />
      )}
      {failure !== null && <Failure lead="Not started.">{failure}</Failure>}
      <div>
        <Button kind="main" type="submit" acting="Starting" isActing={start.isActing || isReading} cannot={cannot}>
          Start writing
        </Button>
      </div>
    </form>
  );
}

const UNTITLED = 'A recipe without a title';

/** What to send; a sentence where the text to start from could not be had. */
async function bodyFor(way: Way, slug: string, title: string, givens: readonly PastedGiven[]): Promise<Body | string> {
  if (way === 'change') return { changes: slug };
  if (way === 'list') {
    return { text: retitled(recipeOfGivens(givens, UNTITLED, slugOf(UNTITLED)), title || UNTITLED) };
  }
  if (way === 'from') {
    const read = await request('recipes.text', { params: { slug }, query: {} });
    if (!read.ok) return read.error.message;
    return { text: retitled(read.value.text, title || `${frontValue(read.value.text, 'title')}, another`) };
  }
  const text = SKELETONS.find((skeleton) => way === `skeleton:${skeleton.id}`)?.text ?? '';
  return { text: title === '' ? text : retitled(text, title) };
}
