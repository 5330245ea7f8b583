import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { readNumber, whyNoNumber } from '../../../analysis/intake/number';

/** The value that a text must have is that of Number(text): ECMA-262, 7.1.4.1, which rounds correctly. */
const digits = (min: number, max: number) =>
  fc.array(fc.integer({ min: 0, max: 9 }), { minLength: min, maxLength: max }).map((list) => list.join(''));
const literal = fc
  .tuple(
    fc.constantFrom('', '-', '+'),
    fc.oneof(
      digits(1, 25),
      fc.tuple(digits(1, 20), digits(0, 20)).map(([a, b]) => `${a}.${b}`),
      digits(1, 20).map((b) => `.${b}`),
    ),
    fc.oneof(
      fc.constant(''),
      fc
        .tuple(fc.constantFrom('e', 'E'), fc.constantFrom('', '-', '+'), fc.integer({ min: 0, max: 280 }))
        .map((parts) => parts.join('')),
    ),
  )
  .map((parts) => parts.join(''));

describe('a number', () => {
  test('has the bits of Number(text), over random literals', () => {
    fc.assert(
      fc.property(literal, (text) => {
        const wanted = Number(text);
        const value = readNumber(text, '.');
        if (Number.isFinite(wanted)) expect(Object.is(value, wanted)).toBe(true);
        else expect(value).toBeNaN();
      }),
      { numRuns: 5000 },
    );
  });

  test('comes back from the shortest text of any double', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        // String(-0) is "0".
        expect(readNumber(String(value), '.')).toBe(value === 0 ? 0 : value);
      }),
      { numRuns: 2000 },
    );
  });

  test('means the same with a decimal comma', () => {
    fc.assert(
      fc.property(literal, (text) => {
        expect(readNumber(text.replace('.', ','), ',')).toBe(readNumber(text, '.'));
      }),
    );
  });

  // Halfway and near-halfway cases, a classic trial of correct rounding: 2^53 + 1, and the double next to 1.
  test.each([
    ['9007199254740993', 9007199254740992],
    ['9007199254740993.0000000001', 9007199254740994],
    ['1.00000000000000011102230246251565', 1],
    ['1.00000000000000011102230246251566', 1.0000000000000002],
    ['-0', -0],
    ['5e-324', 5e-324],
    ['1.', 1],
    ['.5', 0.5],
  ])('%s', (text, wanted) => expect(Object.is(readNumber(text, '.'), wanted)).toBe(true));

  test.each([
    ['', 'is missing'],
    ['NaN', 'no value'],
    ['n/a', 'no value'],
    ['inf', 'no value'],
    ['-Infinity', 'no value'],
    ['0x1F', 'hexadecimal'],
    ['1e999', 'too large'],
    ['0,5', 'has a comma'],
    ['1,234,567', 'separator'],
    ['1,234.5', 'separator'],
    ['1 234', 'separator'],
    ["1'234", 'separator'],
    ['1_000', 'separator'],
    ['\u22121.5', 'minus sign'],
    ['١٢٣', 'not a number'],
    ['１２', 'not a number'],
    ['1e', 'not a number'],
    ['e5', 'not a number'],
    ['.', 'not a number'],
    ['+', 'not a number'],
    ['1.2.3', 'not a number'],
    ['--1', 'not a number'],
    ['0b11', 'not a number'],
    ['1d5', 'not a number'],
    ['12px', 'not a number'],
  ])('%j is refused with a reason', (text, reason) => {
    expect(readNumber(text, '.')).toBeNaN();
    expect(whyNoNumber('x', text, '.')).toContain(reason);
    expect(whyNoNumber('x', text, '.').startsWith('x ')).toBe(true);
  });

  test('a point is no decimal mark in a file of decimal commas', () => {
    expect(readNumber('0.5', ',')).toBeNaN();
    expect(whyNoNumber('y', '0.5', ',')).toBe('y "0.5" has a point, but the decimal mark here is the comma');
    expect(readNumber('1.234,5', ',')).toBeNaN();
    expect(whyNoNumber('y', '1.234,5', ',')).toContain('separator');
  });

  test('no text is read as a number that Number() does not know, and long texts do not hang', () => {
    fc.assert(
      fc.property(fc.string({ unit: fc.constantFrom(...'0123456789.,eE+-xXnaNif \u0661') }), (text) => {
        const value = readNumber(text, '.');
        if (!Number.isNaN(value)) expect(value).toBe(Number(text));
        else expect(whyNoNumber('x', text, '.').length).toBeGreaterThan(4);
      }),
      { numRuns: 2000 },
    );
    expect(readNumber(`${'1'.repeat(60_000)}x`, '.')).toBeNaN();
    expect(whyNoNumber('x', '1,'.repeat(30_000), '.')).toContain('…');
  });
});
