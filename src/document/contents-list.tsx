import type { RecipeDocument } from '#recipe';
import { sectionsOf } from './headings.ts';

export interface ContentsListProps {
  readonly document: RecipeDocument;
  /** Sections that the page adds after the recipe's own. */
  readonly more?: readonly { readonly id: string; readonly text: string }[];
}

/** The contents of a page, on its margin. */
export function ContentsList({ document, more = [] }: ContentsListProps) {
  const sections = sectionsOf(document).filter((section) => !section.number.includes('.'));
  const all = [...sections, ...more.map((one, i) => ({ ...one, number: `${sections.length + i + 1}` }))];
  if (all.length === 0) return null;
  return (
    <nav className="contents" aria-label="On this sheet">
      <ol>
        {all.map((section) => (
          <li key={section.id}>
            <a href={`#${section.id}`}>
              <span>{section.number}</span>
              {section.text}
            </a>
          </li>
        ))}
      </ol>
    </nav>
  );
}

/** A heading of a section that the page adds, numbered on from the recipe's own. */
export function AddedHeading({
  document,
  at,
  id,
  text,
}: {
  document: RecipeDocument;
  at: number;
  id: string;
  text: string;
}) {
  const own = sectionsOf(document).filter((section) => !section.number.includes('.')).length;
  return (
    <h2 id={id}>
      <span className="section-number">{own + at} </span>
      {text}
    </h2>
  );
}
