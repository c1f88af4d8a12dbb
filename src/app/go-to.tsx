import { useQuery } from '@tanstack/react-query';
import { type KeyboardEvent, useId, useRef, useState } from 'react';
import { useNavigate } from 'react-router-dom';
import type { RecipeRow } from '#api';
import { paths } from '../lib/paths.ts';
import { usePreferences } from '../lib/preferences.ts';
import { reading } from '../lib/query-client.ts';
import { useSingleKey } from './single-keys.tsx';

const MOST = 8;

/** "Go to number or name": `/` brings the focus here, ↑ ↓ choose, Enter opens. */
export function GoTo() {
  const [typed, setTyped] = useState('');
  const [isOpen, setOpen] = useState(false);
  const [active, setActive] = useState(0);
  const box = useRef<HTMLInputElement>(null);
  const navigate = useNavigate();
  const listId = useId();
  const recipes = useQuery({ ...reading('recipes.list', {}), enabled: isOpen });
  const { singleKeys } = usePreferences();
  useSingleKey('/', () => box.current?.focus());

  const found = matching(recipes.data?.recipes ?? [], typed);
  const isListed = isOpen && typed.trim() !== '';
  const close = () => {
    setOpen(false);
    setActive(0);
  };
  const go = (recipe: RecipeRow | undefined) => {
    if (recipe === undefined) return;
    setTyped('');
    close();
    void navigate(paths.recipe(recipe.slug));
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.key === 'ArrowDown' || event.key === 'ArrowUp') {
      event.preventDefault();
      const step = event.key === 'ArrowDown' ? 1 : -1;
      setActive((active + step + found.length) % Math.max(1, found.length));
    } else if (event.key === 'Enter') go(found[active]);
    else if (event.key === 'Escape') {
      if (isListed) close();
      else setTyped('');
    }
  };

  return (
    <div className="relative">
      <input
        ref={box}
        type="text"
        role="combobox"
        aria-label="Go to number or name"
        aria-expanded={isListed}
        aria-controls={listId}
        aria-activedescendant={isListed && found[active] !== undefined ? `${listId}-${found[active].slug}` : undefined}
        aria-autocomplete="list"
        autoComplete="off"
        placeholder="Go to number or name"
        value={typed}
        className="h-8 w-52 border-edge border-b bg-transparent pr-7 pl-0.5 text-ink placeholder:text-ink-3"
        onChange={(event) => {
          setTyped(event.target.value);
          setOpen(true);
          setActive(0);
        }}
        onFocus={() => setOpen(true)}
        onBlur={close}
        onKeyDown={onKeyDown}
      />
      <span aria-hidden="true" className="pointer-events-none absolute top-1 right-0.5">
        {singleKeys && <kbd>/</kbd>}
      </span>
      <div
        id={listId}
        role="listbox"
        aria-label="Recipes found"
        className={`float absolute top-10 right-0 w-80 ${isListed ? '' : 'hidden'}`}
      >
        {found.map((recipe, at) => (
          // biome-ignore lint/a11y/useFocusableInteractive: the focus stays in the box, which names the active option
          // biome-ignore lint/a11y/useKeyWithClickEvents: the keys are handled by the box
          <div
            key={recipe.slug}
            id={`${listId}-${recipe.slug}`}
            role="option"
            aria-selected={at === active}
            className={`flex cursor-pointer gap-3 px-3 py-2 ${at === active ? 'bg-wash' : ''}`}
            onPointerEnter={() => setActive(at)}
            onPointerDown={(event) => event.preventDefault()}
            onClick={() => go(recipe)}
          >
            <span className="w-14 flex-none text-ink-2">{recipe.number}</span>
            <span>{recipe.title}</span>
          </div>
        ))}
        {found.length === 0 && (
          <div role="option" aria-selected="false" aria-disabled="true" tabIndex={-1} className="px-3 py-2 text-ink-2">
            {emptyWords(recipes.isError, recipes.isPending)}
          </div>
        )}
      </div>
    </div>
  );
}

function emptyWords(isError: boolean, isPending: boolean): string {
  if (isError) return 'The list of recipes could not be read.';
  return isPending ? 'Reading recipes' : 'No recipe has this number or name.';
}

/** Those whose number or title begins with the words typed, then those that hold them. */
export function matching(recipes: readonly RecipeRow[], typed: string): readonly RecipeRow[] {
  const words = typed.trim().toLowerCase();
  if (words === '') return [];
  const named = recipes.map((recipe) => ({ recipe, names: [recipe.number, recipe.title].map((n) => n.toLowerCase()) }));
  const begins = named.filter(({ names }) => names.some((name) => name.startsWith(words)));
  const holds = named.filter((each) => !begins.includes(each) && each.names.some((name) => name.includes(words)));
  return [...begins, ...holds].slice(0, MOST).map(({ recipe }) => recipe);
}
