/**
 * The colours by role, for both themes. The one place of their values: tailwind.config.ts makes CSS variables and classes
 * of them, charts read them from here, and a test measures their contrast.
 */
export interface Palette {
  /** What the page lies on. */
  readonly paper: string;
  /** The page itself, and anything that floats. */
  readonly page: string;
  /** Hairlines. */
  readonly rule: string;
  readonly ink: string;
  readonly muted: string;
  /** Action, links, verdict free. */
  readonly malachite: string;
  /** Verdict directed, information. */
  readonly cobalt: string;
  /** Verdict confined. */
  readonly plum: string;
  /** Verdict anomalous, attention. */
  readonly ochre: string;
  /** Verdict undecided, quiet things. */
  readonly slate: string;
  /** Errors, destructive acts. */
  readonly madder: string;
  /** Text on filled malachite. */
  readonly onMalachite: string;
  /** Border of a control. */
  readonly control: string;
}

export type ColourRole = keyof Palette;
export type Theme = 'light' | 'dark';

export const palettes: Readonly<Record<Theme, Palette>> = {
  light: {
    paper: '#F3F5F0',
    page: '#FCFDFA',
    rule: '#D3DAD1',
    ink: '#18211E',
    muted: '#56625C',
    malachite: '#0B6A55',
    cobalt: '#2A569B',
    plum: '#77398A',
    ochre: '#8A5A08',
    slate: '#56625C',
    madder: '#A32D45',
    onMalachite: '#FCFDFA',
    control: '#7A867F',
  },
  dark: {
    paper: '#101614',
    page: '#171F1C',
    rule: '#2C3833',
    ink: '#E6EBE4',
    muted: '#9DAAA2',
    malachite: '#5CC5A6',
    cobalt: '#8FB4F0',
    plum: '#CF9BE0',
    ochre: '#E0B255',
    slate: '#9DAAA2',
    madder: '#F08FA0',
    onMalachite: '#101614',
    control: '#6E7D75',
  },
};

/** Symbols is the serif that has the Greek letters and the mathematical signs which Merriweather lacks (app/fonts.css). */
export const fontStacks = {
  serif: ['Merriweather', 'Symbols', 'Georgia', 'serif'],
  sans: ['Merriweather Sans', 'Symbols', 'system-ui', 'sans-serif'],
} as const;

/** Kebab-case name of a role as in `var(--on-malachite)`. */
export const variableName = (role: ColourRole): string =>
  `--${role.replace(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`)}`;
