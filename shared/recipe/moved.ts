import type { Span } from '#text';

/** A change of the text: what stood from `start` to `end` has become `delta` characters longer. */
export interface Edit {
  readonly start: number;
  readonly end: number;
  readonly delta: number;
}

/** Finds the one stretch in which two texts differ. Cost: one pass. */
export function editBetween(before: string, after: string): Edit {
  const shorter = Math.min(before.length, after.length);
  let start = 0;
  while (start < shorter && before.charCodeAt(start) === after.charCodeAt(start)) start++;
  let tail = 0;
  while (
    tail < shorter - start &&
    before.charCodeAt(before.length - 1 - tail) === after.charCodeAt(after.length - 1 - tail)
  ) {
    tail++;
  }
  return { start, end: before.length - tail, delta: after.length - before.length };
}

/**
 * Gives plain data with every span in it moved to where it stands after the edit, which lies inside or outside of each
 * span, never across an end. What does not move is shared, not copied. `replace` may give something else for an object.
 */
export function moved<T>(data: T, edit: Edit, replace?: (object: object) => unknown): T {
  if (edit.delta === 0 && replace === undefined) return data;
  const done = new Map<object, unknown>();
  const walk = (value: unknown): unknown => {
    if (typeof value !== 'object' || value === null) return value;
    const known = done.get(value);
    if (known !== undefined) return known;
    const result = Array.isArray(value) ? walkArray(value) : walkObject(value as Readonly<Record<string, unknown>>);
    done.set(value, result);
    return result;
  };
  const walkArray = (items: readonly unknown[]): readonly unknown[] => {
    let copy: unknown[] | null = null;
    for (let i = 0; i < items.length; i++) {
      const item = walk(items[i]);
      if (item !== items[i]) {
        copy ??= [...items];
        copy[i] = item;
      }
    }
    return copy ?? items;
  };
  const walkObject = (object: Readonly<Record<string, unknown>>): unknown => {
    if (isSpan(object)) return movedSpan(object, edit);
    if (object instanceof Map) return new Map([...object].map(([key, value]) => [key, walk(value)]));
    let copy: Record<string, unknown> | null = null;
    for (const key in object) {
      const value = walk(object[key]);
      if (value !== object[key]) {
        copy ??= { ...object };
        copy[key] = value;
      }
    }
    return replace?.(object) ? { ...(copy ?? object), ...(replace(object) as object) } : (copy ?? object);
  };
  return walk(data) as T;
}

function isSpan(object: object): object is Span {
  return 'start' in object && 'end' in object && typeof object.start === 'number';
}

function movedSpan(at: Span, { start, end, delta }: Edit): Span {
  const from = at.start > start || (at.start >= end && start < end) ? at.start + delta : at.start;
  const to = at.end >= end ? at.end + delta : at.end;
  return from === at.start && to === at.end ? at : { start: from, end: to };
}
