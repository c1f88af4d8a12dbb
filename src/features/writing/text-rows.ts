import { diffLines } from 'diff';

/** A run of lines that both texts share, or a place where they differ. */
export type TextRow =
  | { readonly kind: 'same'; readonly text: string }
  /** `left` or `right` is empty where the lines stand in one text only. */
  | { readonly kind: 'differs'; readonly left: string; readonly right: string };

/** Longest time for comparing, in milliseconds; texts that need more have little in common. */
const LIMIT_MS = 500;

/** Compares two texts line by line; null when they are too different to compare in time. */
export function textRows(left: string, right: string): readonly TextRow[] | null {
  const parts = diffLines(left, right, { timeout: LIMIT_MS });
  if (parts === undefined) return null;
  const rows: TextRow[] = [];
  for (const part of parts) {
    const before = rows.at(-1);
    if (!part.added && !part.removed) rows.push({ kind: 'same', text: part.value });
    else if (before?.kind === 'differs') {
      rows[rows.length - 1] = part.added
        ? { ...before, right: before.right + part.value }
        : { ...before, left: before.left + part.value };
    } else {
      rows.push({ kind: 'differs', left: part.removed ? part.value : '', right: part.added ? part.value : '' });
    }
  }
  return rows;
}

export type Side = 'left' | 'right' | 'both';

/** Joins the rows to one text, taking for each difference what was chosen (by its index among all rows). */
export function mergedText(rows: readonly TextRow[], chosen: ReadonlyMap<number, Side>): string {
  return rows
    .map((row, index) => {
      if (row.kind === 'same') return row.text;
      const side = chosen.get(index) ?? 'both';
      if (side === 'left') return row.left;
      return side === 'right' ? row.right : withLineEnd(row.left) + row.right;
    })
    .join('');
}

function withLineEnd(text: string): string {
  return text === '' || text.endsWith('\n') ? text : `${text}\n`;
}

/**
 * What one would choose knowing what both started from: the side that was changed. Where both were, both are kept,
 * for a person to look at.
 */
export function likelySides(rows: readonly TextRow[], base: string): ReadonlyMap<number, Side> {
  const sides = new Map<number, Side>();
  for (const [index, row] of rows.entries()) if (row.kind === 'differs') sides.set(index, likelySide(row, base));
  return sides;
}

function likelySide({ left, right }: { readonly left: string; readonly right: string }, base: string): Side {
  const leftIsOld = left !== '' && base.includes(left);
  const rightIsOld = right !== '' && base.includes(right);
  if (leftIsOld && !rightIsOld) return 'right';
  if (rightIsOld && !leftIsOld) return 'left';
  if (left === '' && !rightIsOld) return 'right';
  if (right === '' && !leftIsOld) return 'left';
  return 'both';
}
