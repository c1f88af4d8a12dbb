import { useEffect, useRef, useState } from 'react';
import { Link } from 'react-router-dom';
import type { KeptInputs } from '#api';
import type { RecipeDocument } from '#recipe';
import { RecipeView } from '../../document/recipe-view.tsx';
import { useCalculators } from '../../document/use-calculators.ts';
import { usesDecimalComma } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { Ticks } from '../../ui/button.tsx';
import type { LiveCompiled } from './use-compiled.ts';

export interface LivePageProps {
  readonly live: LiveCompiled;
  /** Where the cursor stands in the text. */
  readonly cursor: number;
  readonly onFollow: (offset: number) => void;
}

/** The page as readers will see it. What is typed into its fields is for trying and is not kept. */
export function LivePage({ live, cursor, onFollow }: LivePageProps) {
  const scroller = useRef<HTMLElement>(null);
  const { document } = live;
  useEffect(() => {
    if (document !== null && scroller.current !== null) followCursor(scroller.current, document, cursor);
  }, [document, cursor]);
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: it scrolls by itself and must be reached by the keyboard to do so
    <section ref={scroller} className="live-page" aria-label="Page as readers will see it" tabIndex={0}>
      <p className="live-head lab">
        <span>As readers will see it</span>
        <span>follows your cursor</span>
      </p>
      {live.older !== null && (
        <p className="live-older" role="status">
          {live.older}
          {document !== null && ' Below stands the last page that could be drawn.'}
        </p>
      )}
      {document !== null ? (
        <LiveDocument document={document} onFollow={onFollow} />
      ) : (
        live.older === null && (
          <p className="text-ink-3">
            Reading the text <Ticks />
          </p>
        )
      )}
    </section>
  );
}

function LiveDocument({ document, onFollow }: { document: RecipeDocument; onFollow: (offset: number) => void }) {
  const [texts, setTexts] = useState<KeptInputs>({});
  const calculators = useCalculators(
    document,
    texts,
    (calculator, name, text) => setTexts((now) => withText(now, calculator, name, text)),
    { decimalComma: usesDecimalComma() },
  );
  return (
    <>
      <h2 className="live-title">{document.front.title}</h2>
      <p className="live-summary">{document.front.summary}</p>
      <RecipeView
        document={document}
        calculators={calculators}
        onFollow={(place) => onFollow(place.start)}
        recipeLink={(slug, version) => (
          <Link to={paths.recipe(slug, version)} target="_blank">
            {slug}
          </Link>
        )}
      />
    </>
  );
}

function withText(texts: KeptInputs, calculator: string, name: string, text: string | null): KeptInputs {
  const { [name]: _before, ...others } = texts[calculator] ?? {};
  return { ...texts, [calculator]: text === null ? others : { ...others, [name]: text } };
}

/** Scrolls so that the part the cursor stands in can be seen, and marks it. */
function followCursor(scroller: HTMLElement, document: RecipeDocument, cursor: number): void {
  const texts = [...scroller.querySelectorAll<HTMLElement>('[data-start]')].map((element) => ({
    element,
    start: Number(element.dataset.start),
    end: Number(element.dataset.end),
  }));
  const part = partAt([...texts, ...calculatorParts(scroller, document)], cursor);
  for (const marked of scroller.querySelectorAll('[data-here]')) marked.removeAttribute('data-here');
  if (part === null) return;
  part.element.setAttribute('data-here', '');
  const view = scroller.getBoundingClientRect();
  const place = part.element.getBoundingClientRect();
  const isSeen = place.top >= view.top && place.top < view.bottom - 40;
  if (!isSeen) scroller.scrollTop += place.top - view.top - view.height / 4;
}

/** Calculators carry no place of their own in the page; the document knows it. */
function calculatorParts(scroller: HTMLElement, document: RecipeDocument): readonly Part[] {
  return document.body.flatMap((node) => {
    if (node.type !== 'element' || node.tagName !== 'recipe-calculator' || node.span === undefined) return [];
    const element = scroller.querySelector<HTMLElement>(
      `[id=${JSON.stringify(`calculator-${String(node.properties.id)}`)}]`,
    );
    return element === null ? [] : [{ element, ...node.span }];
  });
}

interface Part {
  readonly element: HTMLElement;
  readonly start: number;
  readonly end: number;
}

/** The smallest part around the cursor, else the last one before it. */
export function partAt(parts: readonly Part[], cursor: number): Part | null {
  const around = parts.filter((part) => part.start <= cursor && cursor <= part.end);
  if (around.length > 0) return around.reduce((a, b) => (b.end - b.start < a.end - a.start ? b : a));
  const before = parts.filter((part) => part.end < cursor);
  return before.length === 0 ? null : before.reduce((a, b) => (b.end >= a.end ? b : a));
}
