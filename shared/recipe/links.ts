import { nearestName } from '#formula';
import type { Span } from '#text';
import type { CompileFacts } from './document.ts';
import { LIMITS } from './limits.ts';
import type { Problems } from './problems.ts';

/** A link to another recipe, to be looked up. */
export interface RecipeLink {
  readonly slug: string;
  readonly version?: number;
  readonly span: Span;
}

export type Address =
  | { readonly kind: 'outside' }
  | { readonly kind: 'in-page'; readonly id: string }
  | { readonly kind: 'recipe'; readonly slug: string };

const OUTSIDE = /^(?:https:\/\/[^/?#@\s]+(?:[/?#]|$)|mailto:[^\s@]+@[^\s@]+$)/i;
const RECIPE = /^\/recipes\/([a-z0-9-]{3,80})$/;

/** Says where an address leads; null for one that may not stand in a recipe (scripts, data, plain http, paths). */
export function readAddress(href: string): Address | null {
  // Browsers drop control characters and read a backslash as a slash: neither belongs into an address.
  if (href.length > LIMITS.address || /[\p{Cc} \\]/u.test(href)) return null;
  if (href.startsWith('#') && href.length > 1) return { kind: 'in-page', id: decodedId(href.slice(1)) };
  const slug = RECIPE.exec(href)?.[1];
  if (slug !== undefined) return { kind: 'recipe', slug };
  return OUTSIDE.test(href) ? { kind: 'outside' } : null;
}

function decodedId(id: string): string {
  return id.replace(/(?:%[0-9a-f]{2})+/gi, (typed) => {
    try {
      return decodeURIComponent(typed);
    } catch {
      // Not UTF-8: no heading has such an id, so the link is told as one that leads nowhere.
      return typed;
    }
  });
}

/** Looks a recipe up among the facts. */
export function checkRecipeLink({ slug, version, span }: RecipeLink, facts: CompileFacts, problems: Problems): void {
  const known = facts.recipes;
  const versions = known !== undefined && Object.hasOwn(known, slug) ? known[slug] : undefined;
  if (known === undefined || (versions === undefined && facts.recipesElsewhere)) {
    problems.warning('not-checked-here', span, { what: `the recipe ${slug}` });
  } else if (versions === undefined) {
    problems.error('recipe-unknown', span, { slug, near: nearestName(slug, Object.keys(known)) ?? '' });
  } else if (version !== undefined && versions.length === 0) {
    problems.warning('not-checked-here', span, { what: `version ${version} of the recipe ${slug}` });
  } else if (version !== undefined && !versions.includes(version)) {
    problems.error('recipe-version-unknown', span, { slug, version, known: versions.map(String) });
  }
}
