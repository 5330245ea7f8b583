import { describe, expect, test } from 'vitest';
import { formatDay, formatMoment } from '@/components/ui/format-date';

describe('a day', () => {
  test('in words, long, short, with its weekday', () => {
    expect(formatDay('2026-03-02')).toBe('2 March 2026');
    expect(formatDay('2026-12-31', 'short')).toBe('31 Dec 2026');
    // 2 March 2026 is a Monday (any calendar; 1 January 2000 was a Saturday, 9557 days before).
    expect(formatDay('2026-03-02', 'weekday')).toBe('Monday 2 March 2026');
    expect(formatDay('2000-01-01', 'weekday')).toBe('Saturday 1 January 2000');
  });

  test.each(['2026-3-2', '2026-13-01', '', 'today'])('%j is refused', (text) => {
    expect(() => formatDay(text)).toThrow(RangeError);
  });
});

describe('a moment in the lab’s time zone', () => {
  // Central European Summer Time begins on 29 March 2026 at 01:00 UTC (EU directive 2000/84/EC: last Sunday in March).
  test.each([
    ['2026-03-29T00:59:00Z', 'Europe/Oslo', '29 Mar 2026, 01:59'],
    ['2026-03-29T01:00:00Z', 'Europe/Oslo', '29 Mar 2026, 03:00'],
    ['2025-12-31T23:30:00Z', 'Europe/Oslo', '1 Jan 2026, 00:30'],
    ['2026-01-01T00:00:00Z', 'UTC', '1 Jan 2026, 00:00'],
    ['2026-03-02T04:30:00Z', 'America/New_York', '1 Mar 2026, 23:30'],
  ])('%s in %s is %s', (moment, zone, words) => {
    expect(formatMoment(new Date(moment), zone)).toBe(words);
  });
});
