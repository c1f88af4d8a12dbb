import { diffArrays, diffLines } from 'diff';

/** A run of words: in both texts, taken out, or put in. */
export interface Words {
  readonly kind: 'same' | 'removed' | 'added';
  readonly text: string;
}

/** One place where two texts differ. */
export interface TextChange {
  /** Where a reader finds it: `Front matter`, `Section 2, What it is for`, `Calculator “Your numbers”`. */
  readonly place: string;
  /** First line, counted from 1, of the new text; of the old one where lines were only taken out. */
  readonly line: number;
  readonly isOldLine: boolean;
  readonly words: readonly Words[];
  /** Only spaces and line breaks differ. */
  readonly isLayoutOnly: boolean;
}

export interface TextChanges {
  readonly changes: readonly TextChange[];
  /** Places of the new text in which nothing differs, in its order. */
  readonly unchanged: readonly string[];
}

/** Longest time for comparing words of one place, in milliseconds; beyond it old and new stand whole, one after the other. */
const WORDS_MS = 200;
const LINES_MS = 1000;

/** Compares two texts by lines, and the words of lines that differ. Cost: bounded by time, see above. */
export function textChanges(before: string, after: string): TextChanges {
  const [old, fresh] = [withLineEnds(before), withLineEnds(after)];
  const parts = diffLines(old, fresh, { timeout: LINES_MS }) ?? [
    { removed: true, added: false, value: old, count: linesOf(old).length },
    { removed: false, added: true, value: fresh, count: linesOf(fresh).length },
  ];
  const places = { before: placesOf(old), after: placesOf(fresh) };
  const changes: TextChange[] = [];
  const touched = new Set<string>();
  const at = { before: 0, after: 0 };
  for (let i = 0; i < parts.length; i++) {
    const part = parts[i];
    if (part === undefined) break;
    if (!part.added && !part.removed) {
      at.before += part.count;
      at.after += part.count;
      continue;
    }
    const next = parts[i + 1];
    const pair = next !== undefined && next.added !== part.added && (next.added || next.removed) ? next : undefined;
    if (pair) i++;
    const removed = part.removed ? part : pair?.removed ? pair : undefined;
    const added = part.added ? part : pair?.added ? pair : undefined;
    const isOldLine = added === undefined;
    const place = (isOldLine ? places.before[at.before] : places.after[at.after]) ?? TOP;
    touched.add(place);
    for (let line = 0; line < (added?.count ?? 0); line++) touched.add(places.after[at.after + line] ?? place);
    const words = wordsOf(removed?.value ?? '', added?.value ?? '');
    changes.push({
      place,
      line: (isOldLine ? at.before : at.after) + 1,
      isOldLine,
      words,
      isLayoutOnly: words.every((word) => word.kind === 'same'),
    });
    at.before += removed?.count ?? 0;
    at.after += added?.count ?? 0;
  }
  const filled = linesOf(fresh).flatMap((line, index) => (line.trim() === '' ? [] : (places.after[index] ?? [])));
  return { changes, unchanged: [...new Set(filled)].filter((place) => !touched.has(place)) };
}

function wordsOf(removed: string, added: string): readonly Words[] {
  if (removed === '') return [{ kind: 'added', text: added }];
  if (added === '') return [{ kind: 'removed', text: removed }];
  const parts = diffArrays(tokensOf(removed), tokensOf(added), { comparator: isSameToken, timeout: WORDS_MS });
  if (parts === undefined) {
    return [
      { kind: 'removed', text: removed },
      { kind: 'added', text: added },
    ];
  }
  return parts.map((part) => ({
    kind: part.removed ? 'removed' : part.added ? 'added' : 'same',
    text: part.value.join(''),
  }));
}

/** Numbers, names and single signs, each with the space after it; so `2` and `2.5` are two numbers, not one with a tail. */
const TOKEN = /(?:\d+(?:[.,]\d+)*|[\p{L}_][\p{L}\p{N}_]*|\S)\s*|\s+/gu;

function tokensOf(text: string): string[] {
  return text.match(TOKEN) ?? [];
}

function isSameToken(one: string, other: string): boolean {
  return one.trim() === other.trim();
}

const TOP = 'Before the first section';

/** The place that each line belongs to. Sections are numbered as the page numbers them. */
function placesOf(text: string): readonly string[] {
  let place = TOP;
  let section = TOP;
  let fence = '';
  const count = { section: 0, part: 0 };
  return linesOf(text).map((line, index) => {
    const mark = /^\s*(`{3,}|~{3,})/.exec(line)?.[1]?.slice(0, 3) ?? '';
    if (fence === '' ? mark !== '' : mark === fence) fence = fence === '' ? mark : '';
    else if (fence === '') {
      if (index === 0 && line.trimEnd() === '---') place = FRONT;
      else if (place === FRONT && line.trimEnd() === '---') {
        place = section;
        return FRONT;
      }
      const heading = place === FRONT ? null : /^(#{1,6})\s+(.+?)\s*#*\s*$/.exec(line);
      if (heading) section = place = sectionName(count, heading[1]?.length ?? 0, heading[2] ?? '');
      if (/<Calculator\b/.test(line)) place = `Calculator “${/title="([^"]*)"/.exec(line)?.[1] ?? ''}”`;
      if (/<\/Calculator>/.test(line)) {
        const own = place;
        place = section;
        return own;
      }
    }
    return place;
  });
}

const FRONT = 'Front matter';

function sectionName(count: { section: number; part: number }, depth: number, title: string): string {
  const isPart = depth > 2 && count.section > 0;
  if (isPart) count.part++;
  else {
    count.section++;
    count.part = 0;
  }
  return `Section ${count.section}${isPart ? `.${count.part}` : ''}, ${title}`;
}

/** A last line without an end would differ from the same line with one. */
function withLineEnds(text: string): string {
  const lines = text.replaceAll('\r\n', '\n');
  return lines === '' || lines.endsWith('\n') ? lines : `${lines}\n`;
}

function linesOf(text: string): readonly string[] {
  return text === '' ? [] : text.replace(/\n$/, '').split('\n');
}
