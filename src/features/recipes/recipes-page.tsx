import { useQuery } from '@tanstack/react-query';
import { type KeyboardEvent, type ReactNode, type RefObject, useEffect, useRef, useState } from 'react';
import { Link, useNavigation, useSearchParams } from 'react-router-dom';
import type { RecipeRow } from '#api';
import { paths } from '../../lib/paths.ts';
import { useMay } from '../../lib/session.ts';
import { announce } from '../../ui/announce.tsx';
import { EmptyLines, Failure, Loading } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { MarginNote, Sheet } from '../../ui/sheet.tsx';
import { FacetLists } from './facet-lists.tsx';
import { FACET_NAMES, type FacetName, grouped, narrowed, tickedIn } from './facets.ts';
import { recipesReading, searchReading } from './queries.ts';
import { RecipeRegister } from './recipe-register.tsx';
import './recipes.css';

/** Quiet before what is typed is searched, in milliseconds. Source: common practice, no source. */
const QUIET_MS = 120;

export function RecipesPage() {
  usePageTitle('Recipes');
  const recipes = useQuery(recipesReading);
  const mayWrite = useMay('write drafts');
  const count = recipes.data?.recipes.length;
  const margin = (
    <MarginNote label={count === undefined ? 'Recipes' : count === 1 ? '1 recipe' : `${count} recipes`}>
      <p>Words search names, purposes, topics and labels. A letter amiss is forgiven.</p>
      {mayWrite && (
        <p className="mt-4">
          <Link to={paths.start()}>Drafts, and a new recipe</Link>
        </p>
      )}
    </MarginNote>
  );
  if (recipes.data) return <RecipeFinder recipes={recipes.data.recipes} mayWrite={mayWrite} margin={margin} />;
  return (
    <Sheet className="pt-6" margin={margin}>
      <ListHead />
      <div className="mt-4">
        {recipes.isError ? (
          <Failure lead="The list was not read." onAgain={() => void recipes.refetch()}>
            {recipes.error.message}
          </Failure>
        ) : (
          <Loading label="Reading the recipes" lines={6} />
        )}
      </div>
    </Sheet>
  );
}

function ListHead() {
  return <h1 tabIndex={-1}>What do you need to build?</h1>;
}

interface RecipeFinderProps {
  readonly recipes: readonly RecipeRow[];
  readonly mayWrite: boolean;
  readonly margin: ReactNode;
}

function RecipeFinder({ recipes, mayWrite, margin }: RecipeFinderProps) {
  const [params, setParams] = useSearchParams();
  const [typed, setTyped] = useState(params.get('q') ?? '');
  const asked = useQuiet(typed.trim(), QUIET_MS);
  const search = useQuery(searchReading(asked));
  const ticked = tickedIn(params);
  const list = useRef<HTMLDivElement>(null);
  const isSearching = typed.trim() !== '';
  const ranked = isSearching && search.data ? inOrderOf(search.data.hits, recipes) : recipes;
  const found = narrowed(ranked, ticked);

  const isLeaving = useRef<boolean>(false);
  isLeaving.current = useNavigation().state !== 'idle';
  useEffect(() => {
    // A row was opened meanwhile and its page is on the way: another navigation would end that one.
    if (isLeaving.current) return;
    setParams(
      (now) => {
        const next = new URLSearchParams(now);
        if (asked === '') next.delete('q');
        else next.set('q', asked);
        return next;
      },
      { replace: true, preventScrollReset: true },
    );
  }, [asked, setParams]);
  const isWaiting = isSearching && (typed.trim() !== asked || search.isFetching || search.data === undefined);
  const askEnter = useEnterForFirst(isWaiting, list);
  useSpokenCount(asked, search.isFetching, found.length, recipes.length);

  const tick = (facet: FacetName, value: string, isTicked: boolean) => {
    const next = new URLSearchParams(params);
    next.delete(facet);
    const others = ticked[facet].filter((one) => one !== value);
    for (const one of isTicked ? [...others, value] : others) next.append(facet, one);
    setParams(next, { replace: true, preventScrollReset: true });
  };
  const clear = () => {
    setTyped('');
    const next = new URLSearchParams(params);
    for (const name of ['q', ...FACET_NAMES]) next.delete(name);
    setParams(next, { replace: true });
  };
  return (
    <>
      <Sheet className="pt-6" margin={margin}>
        <ListHead />
        <div className="ask">
          <label className="sr-only" htmlFor="recipe-search">
            Search the recipes
          </label>
          <input
            id="recipe-search"
            type="search"
            autoComplete="off"
            spellCheck={false}
            maxLength={200}
            placeholder="difference amplifier, virtual ground, level shift …"
            value={typed}
            onChange={(event) => {
              askEnter.forget();
              setTyped(event.target.value);
            }}
            onKeyDown={(event) => {
              if (event.key === 'ArrowDown') fromSearchToList(event, list.current);
              else if (event.key === 'Enter') askEnter.press(event);
            }}
          />
          <span className="ask-count">{`${found.length} of ${recipes.length}`}</span>
        </div>
        {isSearching && search.isError && (
          <Failure lead="Not searched." onAgain={() => void search.refetch()}>
            {search.error.message} The whole list is still here.
          </Failure>
        )}
        <FacetLists all={recipes} found={ranked} ticked={ticked} onTick={tick} />
      </Sheet>
      {/* biome-ignore lint/a11y/noStaticElementInteractions: carries the arrow keys from one group's register to the next */}
      <div ref={list} className="recipe-groups" onKeyDown={(event) => betweenGroups(event, list.current)}>
        {grouped(found, isSearching).map((group) => (
          <Sheet
            key={group.purpose}
            className="recipe-group"
            margin={
              <>
                <h2 className="recipe-purpose">{sentence(group.purpose)}</h2>
                <p className="lab">{group.rows.length === 1 ? '1 recipe' : `${group.rows.length} recipes`}</p>
              </>
            }
          >
            <RecipeRegister purpose={group.purpose} rows={group.rows} />
          </Sheet>
        ))}
        {found.length === 0 && (
          <Sheet className="pt-4">
            <NothingFound isEmpty={recipes.length === 0} mayWrite={mayWrite} typed={typed.trim()} onClear={clear} />
          </Sheet>
        )}
      </div>
    </>
  );
}

interface NothingFoundProps {
  readonly isEmpty: boolean;
  readonly mayWrite: boolean;
  readonly typed: string;
  readonly onClear: () => void;
}

function NothingFound({ isEmpty, mayWrite, typed, onClear }: NothingFoundProps) {
  return (
    <EmptyLines>
      <span>{isEmpty ? 'No recipe is published yet.' : `No recipe matches${typed === '' ? '' : ` “${typed}”`}.`}</span>
      <span className="flex flex-wrap gap-4">
        {!isEmpty && (
          <Button kind="text" onClick={onClear}>
            Show all recipes
          </Button>
        )}
        {mayWrite && <Link to={paths.start()}>Write a recipe</Link>}
      </span>
    </EmptyLines>
  );
}

/** The value once it has stood still for a while. */
function useQuiet(value: string, quietMs: number): string {
  const [quiet, setQuiet] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setQuiet(value), quietMs);
    return () => clearTimeout(timer);
  }, [value, quietMs]);
  return quiet;
}

/** Says how many are left once an answer is there. */
function useSpokenCount(asked: string, isFetching: boolean, found: number, all: number): void {
  const spoken = useRef(asked);
  useEffect(() => {
    if (isFetching || spoken.current === asked) return;
    spoken.current = asked;
    announce(`${found} of ${all} recipes`);
  }, [asked, isFetching, found, all]);
}

function inOrderOf(hits: readonly { readonly slug: string }[], recipes: readonly RecipeRow[]): readonly RecipeRow[] {
  const bySlug = new Map(recipes.map((row) => [row.slug, row]));
  return hits.flatMap((hit) => bySlug.get(hit.slug) ?? []);
}

function rowLinks(list: HTMLElement | null): readonly HTMLAnchorElement[] {
  return [...(list?.querySelectorAll<HTMLAnchorElement>('.register tbody th a[href]') ?? [])];
}

/** ↓ goes from the search to the first row. */
function fromSearchToList(event: KeyboardEvent, list: HTMLElement | null): void {
  const [first] = rowLinks(list);
  if (!first) return;
  event.preventDefault();
  first.focus();
}

/** Enter opens the first row for what is typed, as soon as that row stands there. */
function useEnterForFirst(isWaiting: boolean, list: RefObject<HTMLElement | null>) {
  const isAsked = useRef<boolean>(false);
  const open = () => {
    isAsked.current = false;
    rowLinks(list.current)[0]?.click();
  };
  useEffect(() => {
    if (isAsked.current && !isWaiting) open();
  });
  return {
    press: (event: KeyboardEvent) => {
      event.preventDefault();
      if (isWaiting) isAsked.current = true;
      else open();
    },
    forget: () => {
      isAsked.current = false;
    },
  };
}

/** Past the end of one group's register the arrow keys go on in the next. */
function betweenGroups(event: KeyboardEvent, list: HTMLElement | null): void {
  if (event.defaultPrevented || (event.key !== 'ArrowDown' && event.key !== 'ArrowUp')) return;
  const links: readonly (HTMLElement | null)[] = rowLinks(list);
  const at = document.activeElement instanceof HTMLElement ? links.indexOf(document.activeElement) : -1;
  if (at < 0) return;
  event.preventDefault();
  const next = links[at + (event.key === 'ArrowDown' ? 1 : -1)];
  (next ?? (event.key === 'ArrowUp' ? document.getElementById('recipe-search') : null))?.focus();
}

function sentence(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}
