/** Days and moments in words. Written out here rather than by the browser's language, so that server and page agree. */

const MONTHS = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
] as const;
const WEEKDAYS = ['Sunday', 'Monday', 'Tuesday', 'Wednesday', 'Thursday', 'Friday', 'Saturday'] as const;

/**
 * A calendar day: "2 March 2026", short "2 Mar 2026", with its weekday "Monday 2 March 2026".
 * @param day - year-month-day. @throws RangeError - not such a day.
 */
export function formatDay(day: string, form: 'long' | 'short' | 'weekday' = 'long'): string {
  const [, year, month, date] = /^(\d{4})-(\d\d)-(\d\d)$/.exec(day) ?? [];
  const name = MONTHS[Number(month) - 1];
  if (!year || !name) throw new RangeError(`not a day: "${day}"`);
  const shown = `${Number(date)} ${form === 'short' ? name.slice(0, 3) : name} ${year}`;
  return form === 'weekday' ? `${WEEKDAYS[new Date(`${day}T00:00:00Z`).getUTCDay()]} ${shown}` : shown;
}

/** A moment in the lab's time zone: "2 Mar 2026, 14:05". @param timeZone - IANA name, e.g. "Europe/Oslo". */
export function formatMoment(moment: Date, timeZone: string): string {
  const parts = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    year: 'numeric',
    month: '2-digit',
    day: '2-digit',
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
  }).formatToParts(moment);
  const part = (type: Intl.DateTimeFormatPartTypes) => parts.find((one) => one.type === type)?.value ?? '';
  const day = `${part('year').padStart(4, '0')}-${part('month')}-${part('day')}`;
  return `${formatDay(day, 'short')}, ${part('hour')}:${part('minute')}`;
}
