import { frontValue } from './front-text.ts';

/** A complete recipe to begin with: it compiles, its examples agree, and every part of it is there to be written over. */
export interface Skeleton {
  readonly id: string;
  readonly title: string;
  readonly summary: string;
  readonly text: string;
}

const TEXTS = import.meta.glob<string>('../../../content/skeletons/*.mdx', {
  query: '?raw',
  import: 'default',
  eager: true,
});

/** What each is good for, by the name of its file; another one is called by its own title. */
const WORDS: Readonly<Record<string, { readonly title: string; readonly summary: string }>> = {
  empty: { title: 'A bare frame', summary: 'One calculator, one formula, one example, to be written over.' },
  'op-amp-stage': { title: 'An op amp stage', summary: 'A signal over a range, a limit that stops, a level in dB.' },
  'stored-energy': { title: 'A circuit with a hazard', summary: 'A hazard with its caution, times and energies.' },
};

export const SKELETONS: readonly Skeleton[] = Object.entries(TEXTS).map(([path, text]) => {
  const id = path.replace(/^.*\/|\.mdx$/g, '');
  return { id, text, title: frontValue(text, 'title'), summary: frontValue(text, 'summary'), ...WORDS[id] };
});
