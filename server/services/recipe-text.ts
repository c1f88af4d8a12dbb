import { createHash } from 'node:crypto';
import { LineIndex, type ShownDiagnostic } from '#text';

/** SHA-256 of a text as lower-case hexadecimal: what a person saw when they decided. */
export function hashText(text: string): string {
  return createHash('sha256').update(text, 'utf8').digest('hex');
}

/** How much of a text is read for its front matter in lists. Common practice, no source. */
export const HEAD_LENGTH = 4000;

/** Reads a one-line key of the front matter from the start of a text that may be half typed; empty when it is not there. */
export function frontKey(text: string, key: 'title' | 'slug' | 'number'): string {
  const place = keyPlace(text, key);
  if (place === null) return '';
  const value = text.slice(place.start, place.end).trim();
  const quoted = /^(["'])(.*)\1$/.exec(value);
  return (quoted?.[2] ?? value).trim();
}

/** An error at a key of the front matter, for what only the server can know, such as a slug that another recipe has. */
export function problemAtKey(
  text: string,
  key: 'slug' | 'number',
  problem: Pick<ShownDiagnostic, 'code' | 'message' | 'hint'>,
): ShownDiagnostic {
  const lines = new LineIndex(text);
  const place = keyPlace(text, key) ?? { start: 0, end: 0 };
  return { severity: 'error', ...problem, start: lines.pointAt(place.start), end: lines.pointAt(place.end) };
}

function keyPlace(text: string, key: string): { readonly start: number; readonly end: number } | null {
  const front = /^---[ \t]*\r?\n([\s\S]*?)(?:^---[ \t]*$|$(?![\s\S]))/m.exec(text);
  if (front === null || front.index !== 0) return null;
  const line = new RegExp(`^${key}:[ \\t]*(.*)$`, 'm').exec(front[0]);
  if (line === null) return null;
  const value = line[1] ?? '';
  const start = line.index + line[0].length - value.length;
  return { start, end: start + value.trimEnd().length };
}
