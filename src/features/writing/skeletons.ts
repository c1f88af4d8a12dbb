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

export const SKELETONS: readonly Skeleton[] = Object.entries(TEXTS).map(([path, text]) => ({
  id: path.replace(/^.*\/|\.mdx$/g, ''),
  title: frontValue(text, 'title'),
  summary: frontValue(text, 'summary'),
  text,
}));
