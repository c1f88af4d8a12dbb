const ENGLISH = 'en-GB';

/** Whether a comma between digits is this person's decimal sign; elsewhere it may stand for thousands and is asked about. */
export function usesDecimalComma(locale: string = navigator.language): boolean {
  const parts = new Intl.NumberFormat(locale).formatToParts(1.5);
  return parts.some((part) => part.type === 'decimal' && part.value === ',');
}

/** An instant as a day in this person's zone: `18 May 2026`. */
export function dayText(instant: string): string {
  return new Intl.DateTimeFormat(ENGLISH, { day: 'numeric', month: 'short', year: 'numeric' }).format(
    new Date(instant),
  );
}

/** An instant as day and time in this person's zone: `18 May 2026, 14:05`. */
export function momentText(instant: string): string {
  return new Intl.DateTimeFormat(ENGLISH, {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
  }).format(new Date(instant));
}

/** A calendar date, which belongs to no zone: `2026-05-18` → `18 May 2026`. */
export function calendarDayText(date: string): string {
  return new Intl.DateTimeFormat(ENGLISH, {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    timeZone: 'UTC',
  }).format(new Date(`${date}T00:00:00Z`));
}

/** A wait in words, rounded up: `40 seconds`, `3 minutes`. Units: seconds. */
export function waitText(seconds: number): string {
  if (seconds < 90) return seconds === 1 ? '1 second' : `${Math.ceil(seconds)} seconds`;
  return `${Math.ceil(seconds / 60)} minutes`;
}
