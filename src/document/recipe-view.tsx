import { type MouseEvent, type ReactNode, useMemo } from 'react';
import type { RecipeDocument } from '#recipe';
import { BODY_COMPONENTS } from './body-components.tsx';
import { BodyContext, type BodySurroundings } from './body-context.ts';
import { drawBody } from './body-nodes.tsx';
import './document.css';
import type { CalculatorsState } from './use-calculators.ts';

/** A place in the recipe's text, UTF-16 offsets. */
export interface TextPlace {
  readonly start: number;
  readonly end: number;
}

export interface RecipeViewProps {
  readonly document: RecipeDocument;
  readonly calculators: CalculatorsState;
  /** Called with the place in the text of the smallest part that was pressed, for a page that shows the text beside it. */
  readonly onFollow?: (place: TextPlace) => void;
  /** `beside`: the page draws the panels itself, and their places in the text only point there. */
  readonly panels?: 'inline' | 'beside';
  /** How a link to another recipe is drawn; without it only its slug stands there. */
  readonly recipeLink?: (slug: string, version: number | undefined) => ReactNode;
}

/** The page of a recipe: prose, maths, notes, cautions, live numbers and, where they stand in the text, its calculators. */
export function RecipeView({ document, calculators, onFollow, panels = 'inline', recipeLink }: RecipeViewProps) {
  const isFollowed = onFollow !== undefined;
  const drawn = useMemo(() => drawBody(document.body, BODY_COMPONENTS, isFollowed), [document, isFollowed]);
  const surroundings = useMemo<BodySurroundings>(
    () => ({ document, calculators, panels, recipeLink }),
    [document, calculators, panels, recipeLink],
  );
  const follow = (event: MouseEvent<HTMLElement>) => {
    const place = event.target instanceof Element ? placeOf(event.target) : null;
    if (place !== null) onFollow?.(place);
  };
  return (
    <BodyContext value={surroundings}>
      {/* biome-ignore lint/a11y/useKeyWithClickEvents: an addition for the pointer; the keyboard reaches the text itself */}
      <article className="prose" onClick={isFollowed ? follow : undefined}>
        {drawn}
      </article>
    </BodyContext>
  );
}

/** Parts that act by themselves are not followed. */
const ACTING = 'a, button, input, select, label, summary';

function placeOf(target: Element): TextPlace | null {
  if (target.closest(ACTING)) return null;
  const part = target.closest<HTMLElement>('[data-start]');
  const start = Number(part?.dataset.start);
  const end = Number(part?.dataset.end);
  return part === null || Number.isNaN(start) || Number.isNaN(end) ? null : { start, end };
}
