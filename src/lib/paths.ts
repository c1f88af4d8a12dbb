import { LINK_PATHS } from '#api';

/** Every page's address. Features lead to each other by these and never by importing each other. */
export const paths = {
  recipes: () => '/recipes',
  recipe: (slug: string, version?: number) =>
    version === undefined ? `/recipes/${slug}` : `/recipes/${slug}?version=${version}`,
  start: () => '/write',
  /** Start from a recipe's text: as a change of it, or as a recipe of its own. */
  startFrom: (slug: string) => `/write?from=${slug}`,
  write: (draftId: string) => `/write/${draftId}`,
  reviews: () => '/reviews',
  review: (draftId: string) => `/reviews/${draftId}`,
  designs: () => '/designs',
  design: (id: string) => `/designs/${id}`,
  team: (tab?: string) => (tab === undefined ? '/team' : `/team?tab=${tab}`),
  account: () => '/account',
  signIn: (wanted?: string) => (wanted === undefined ? '/sign-in' : `/sign-in?to=${encodeURIComponent(wanted)}`),
  forgotten: () => '/forgotten',
  setUp: () => LINK_PATHS.setUp,
  invitation: () => LINK_PATHS.invitation,
  password: () => LINK_PATHS.password,
} as const;

/** The page to open after signing in: a path of ours, never another site's. */
export function wantedPath(search: string): string {
  const to = new URLSearchParams(search).get('to');
  return to?.startsWith('/') && !to.startsWith('//') && !to.startsWith('/\\') ? to : paths.recipes();
}
