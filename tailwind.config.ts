import type { Config } from 'tailwindcss';
import plugin from 'tailwindcss/plugin';
import { fontStacks, palettes, variableName, type ColourRole, type Theme } from './components/ui/tokens';

const roles = Object.keys(palettes.light) as ColourRole[];

const family = (names: readonly string[]): string =>
  names.map((name) => (name.includes(' ') ? `"${name}"` : name)).join(', ');

const variables = (theme: Theme): Record<string, string> => ({
  'color-scheme': theme,
  ...Object.fromEntries(roles.map((role) => [variableName(role), palettes[theme][role]])),
});

/**
 * Tokens: colours by role (classes follow the theme by themselves, no `dark:` needed), two families, a 4 px grid, radii of
 * 2 and 3 px. Breakpoints: `tab` from where the bottom bar becomes the narrow spine, `wide` where the margin stands beside
 * the page, `desk` where the spine has room for words.
 */
export default {
  content: ['./app/**/*.{ts,tsx}', './components/**/*.{ts,tsx}', './editor/**/*.{ts,tsx}'],
  theme: {
    screens: { tab: '700px', wide: '1100px', desk: '1280px' },
    extend: {
      colors: Object.fromEntries(roles.map((role) => [kebab(role), `var(${variableName(role)})`])),
      fontFamily: { serif: [...fontStacks.serif], sans: [...fontStacks.sans] },
      fontSize: {
        fine: ['0.75rem', '1rem'],
        label: ['0.8125rem', '1.25rem'],
        small: ['0.875rem', '1.375rem'],
        text: ['1.0625rem', '1.6'],
        lead: ['1.1875rem', '1.6'],
        heading: ['1.375rem', '1.875rem'],
        title: ['1.75rem', '2.25rem'],
        headline: ['2rem', '2.5rem'],
      },
      borderRadius: { none: '0', sm: '2px', DEFAULT: '2px', md: '3px' },
      boxShadow: { float: '0 1px 2px rgb(0 0 0 / 0.08), 0 8px 24px rgb(0 0 0 / 0.12)' },
      maxWidth: { measure: '68ch', page: '760px' },
      spacing: { margin: '220px', spine: '176px', 'spine-narrow': '64px' },
      transitionDuration: { DEFAULT: '120ms' },
    },
  },
  plugins: [
    plugin(({ addBase }) => {
      addBase({
        ':root': {
          '--serif': family(fontStacks.serif),
          '--sans': family(fontStacks.sans),
          ...variables('light'),
        },
        '@media (prefers-color-scheme: dark)': { ':root:not([data-theme="light"])': variables('dark') },
        ':root[data-theme="dark"]': variables('dark'),
        // Paper is light, whatever the window is.
        '@media print': { ':root:root:root': variables('light') },
      });
    }),
  ],
} satisfies Config;

function kebab(role: ColourRole): string {
  return variableName(role).slice(2);
}
