import { describe, expect, test } from 'vitest';
import { palettes, type ColourRole, type Theme } from '@/components/ui/tokens';

/** Relative luminance as WCAG 2.2 defines it (W3C Recommendation, definition "relative luminance"). */
function luminance(hex: string): number {
  const [red, green, blue] = [1, 3, 5].map((at) => {
    const channel = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
  }) as [number, number, number];
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

/** Contrast ratio as WCAG 2.2 defines it: (lighter + 0.05) / (darker + 0.05). */
function contrast(one: string, other: string): number {
  const [dark, light] = [luminance(one), luminance(other)].sort((a, b) => a - b) as [number, number];
  return (light + 0.05) / (dark + 0.05);
}

test('the formula gives the values that follow from the definition', () => {
  expect(contrast('#000000', '#FFFFFF')).toBeCloseTo(21, 10);
  expect(contrast('#777777', '#FFFFFF')).toBeCloseTo(4.48, 2);
});

const texts: ColourRole[] = ['ink', 'muted', 'malachite', 'cobalt', 'plum', 'ochre', 'slate', 'madder'];

describe.each<Theme>(['light', 'dark'])('%s theme', (theme) => {
  const palette = palettes[theme];

  // WCAG 2.2, success criterion 1.4.3: 4.5:1 for text.
  test.each(texts.flatMap((role) => [[role, 'paper'] as const, [role, 'page'] as const]))(
    '%s can be read on %s',
    (role, ground) => {
      expect(contrast(palette[role], palette[ground])).toBeGreaterThanOrEqual(4.5);
    },
  );

  test('text on filled malachite can be read, and page-coloured text on filled madder', () => {
    expect(contrast(palette.onMalachite, palette.malachite)).toBeGreaterThanOrEqual(4.5);
    expect(contrast(palette.page, palette.madder)).toBeGreaterThanOrEqual(4.5);
  });

  // WCAG 2.2, success criterion 1.4.11: 3:1 for what identifies a control.
  test.each(['paper', 'page'] as const)('the border of a control is seen on %s', (ground) => {
    expect(contrast(palette.control, palette[ground])).toBeGreaterThanOrEqual(3);
  });
});
