/**
 * Calendar dates in the team's time zone, as `YYYY-MM-DD`. Instants are turned into dates here and nowhere else.
 */

/** Gives the date that a calendar on the wall of that zone shows at this instant. Throws a RangeError for an unknown zone. */
export function dateIn(timeZone: string, at: Date): string {
  const parts = new Intl.DateTimeFormat('en-CA', {
    timeZone,
    calendar: 'gregory',
    numberingSystem: 'latn',
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
  }).formatToParts(at);
  const part = (type: 'year' | 'month' | 'day') => parts.find((p) => p.type === type)?.value ?? '';
  return `${part('year')}-${part('month')}-${part('day')}`;
}

/** Adds whole months; a day that the month does not have becomes its last one (31 August + 6 months: 28 or 29 February). */
export function addMonths(date: string, months: number): string {
  const [year = 0, month = 1, day = 1] = date.split('-').map(Number);
  const index = year * 12 + (month - 1) + months;
  const toYear = Math.floor(index / 12);
  const toMonth = index - toYear * 12;
  const lastDay = new Date(Date.UTC(toYear, toMonth + 1, 0)).getUTCDate();
  return new Date(Date.UTC(toYear, toMonth, Math.min(day, lastDay))).toISOString().slice(0, 10);
}
