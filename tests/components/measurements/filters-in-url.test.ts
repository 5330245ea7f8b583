import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { isReversed, readFilters, writeFilters } from '@/components/measurements/filters-in-url';
import {
  MEASUREMENT_SORTS,
  measurementQuery,
  NO_FILTERS,
  RANGE_MODES,
  VERDICTS,
  type MeasurementFilters,
} from '@/db/inputs/measurement';

const day = fc
  .date({ min: new Date('1900-01-01T00:00:00Z'), max: new Date('2199-12-31T00:00:00Z'), noInvalidDate: true })
  .map((date) => date.toISOString().slice(0, 10));
const bound = fc
  .double({ min: 0, max: 1e300, noNaN: true })
  .map((value) => (Object.is(value, -0) ? 0 : value));
const anyFilters: fc.Arbitrary<MeasurementFilters> = fc
  .record({
    dFrom: fc.option(bound),
    dTo: fc.option(bound),
    range: fc.constantFrom(...RANGE_MODES),
    verdict: fc.shuffledSubarray([...VERDICTS]),
    notebook: fc.uniqueArray(fc.uuid(), { maxLength: 5 }),
    dateFrom: fc.option(day),
    dateTo: fc.option(day),
    sort: fc.constantFrom(...MEASUREMENT_SORTS),
  })
  .filter(({ dFrom, dTo, dateFrom, dateTo }) => !isReversed(dFrom, dTo) && !isReversed(dateFrom, dateTo));

describe('a question in the address', () => {
  test('comes back as it was asked, to the last digit', () => {
    fc.assert(
      fc.property(anyFilters, (filters) => {
        const text = writeFilters(filters).toString();
        expect(readFilters(new URLSearchParams(text))).toEqual({ filters, faults: {} });
      }),
      { seed: 5, numRuns: 1000 },
    );
  });

  test('is understood by the route in the same way', () => {
    fc.assert(
      fc.property(anyFilters, (filters) => {
        const query = Object.fromEntries(writeFilters(filters));
        expect(measurementQuery.parse(query)).toEqual({ ...filters, after: null, limit: 50 });
      }),
      { seed: 6, numRuns: 500 },
    );
  });

  test('names only what is asked for', () => {
    expect(writeFilters(NO_FILTERS).toString()).toBe('');
    const filters: MeasurementFilters = { ...NO_FILTERS, dFrom: 0, verdict: ['free', 'confined'] };
    expect(writeFilters(filters).toString()).toBe('dFrom=0&verdict=free%2Cconfined');
  });

  test('whatever somebody writes there, every part is read, or named as not readable and not applied', () => {
    const keys = [...Object.keys(NO_FILTERS), 'after', 'utm'];
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.constantFrom(...keys), fc.string({ unit: 'binary' })), { maxLength: 12 }),
        (pairs) => {
          const { filters, faults } = readFilters(new URLSearchParams(pairs));
          expect(measurementQuery.safeParse(Object.fromEntries(writeFilters(filters))).success).toBe(true);
          for (const key of Object.keys(faults) as (keyof MeasurementFilters)[]) {
            expect(filters[key]).toEqual(NO_FILTERS[key]);
            expect(faults[key]?.message).not.toBe('');
          }
        },
      ),
      { seed: 7, numRuns: 1000 },
    );
  });

  test.each([
    ['dFrom=abc', 'dFrom', 'abc', 'Enter a number in µm²/s, such as 0.43 or 2e-3.'],
    ['dFrom=0,43', 'dFrom', '0,43', 'Write the decimal with a point, as in 0.43.'],
    ['dTo=-2', 'dTo', '-2', 'D is never negative. Enter zero or more.'],
    ['dFrom=0.6&dTo=0.3', 'dTo', '0.3', 'The upper bound is below the lower one.'],
    [
      'dateFrom=2026-02-30',
      'dateFrom',
      '2026-02-30',
      'Enter a date that exists, as year-month-day: 2026-03-02.',
    ],
    ['dateFrom=2026-03-02&dateTo=2026-03-01', 'dateTo', '2026-03-01', 'This day is before the first one.'],
    ['sort=d-asc&sort=d-desc', 'sort', 'd-asc', 'This was given twice.'],
  ] as const)('%s says what is wrong and keeps what was written', (query, key, text, message) => {
    const { filters, faults } = readFilters(new URLSearchParams(query));
    expect(faults[key]).toEqual({ text, message });
    expect(filters[key]).toEqual(NO_FILTERS[key]);
  });
});
