const WORDS = 'en-GB';

const dayFormat = new Intl.DateTimeFormat(WORDS, {
  day: 'numeric',
  month: 'short',
  year: 'numeric',
});
const shortDayFormat = new Intl.DateTimeFormat(WORDS, { day: 'numeric', month: 'short' });
const timeFormat = new Intl.DateTimeFormat(WORDS, { hour: '2-digit', minute: '2-digit' });
const zoneFormat = new Intl.DateTimeFormat(WORDS, {
  day: 'numeric',
  month: 'short',
  year: 'numeric',
  hour: '2-digit',
  minute: '2-digit',
  second: '2-digit',
  timeZoneName: 'short',
});

type When = string | Date;
const dateOf = (when: When): Date => (typeof when === 'string' ? new Date(when) : when);
const isValid = (date: Date): boolean => Number.isFinite(date.getTime());

/** "30 Nov 2026", local. */
export const formatDate = (when: When): string => {
  const date = dateOf(when);
  return isValid(date) ? dayFormat.format(date) : '–';
};

/** "14:05", local. */
export const formatTime = (when: When): string => timeFormat.format(dateOf(when));

/** "30 Nov 2026, 16:20", local. */
export const formatInstant = (when: When): string => {
  const date = dateOf(when);
  return isValid(date) ? `${dayFormat.format(date)}, ${timeFormat.format(date)}` : '–';
};

/** With seconds and zone, for the record and for titles on hover. */
export const formatInstantFully = (when: When): string => zoneFormat.format(dateOf(when));

const startOfDay = (date: Date): number =>
  new Date(date.getFullYear(), date.getMonth(), date.getDate()).getTime();
const DAY_MS = 86_400_000;

/** As people say it: "09:42" today, "Yesterday", "27 Nov", "27 Nov 2025". */
export function formatWhen(when: When, now: Date = new Date()): string {
  const date = dateOf(when);
  if (!isValid(date)) return '–';
  const daysAgo = Math.round((startOfDay(now) - startOfDay(date)) / DAY_MS);
  if (daysAgo === 0) return timeFormat.format(date);
  if (daysAgo === 1) return 'Yesterday';
  return date.getFullYear() === now.getFullYear()
    ? shortDayFormat.format(date)
    : dayFormat.format(date);
}

/** "2026-11-30", for file names and files. */
export const isoDate = (when: When = new Date()): string => dateOf(when).toISOString().slice(0, 10);
