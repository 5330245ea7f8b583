/** Light, dark, or as the system says. Kept in a cookie, so that the server draws the first page right. */
export type ThemeChoice = 'system' | 'light' | 'dark';

export const THEME_COOKIE = 'motebook-theme';
const YEAR_SECONDS = 365 * 24 * 3600;

export function readTheme(value: string | undefined): ThemeChoice {
  return value === 'light' || value === 'dark' ? value : 'system';
}

/** Changes the page at once and remembers the choice in this browser. */
export function applyTheme(choice: ThemeChoice): void {
  if (choice === 'system') delete document.documentElement.dataset.theme;
  else document.documentElement.dataset.theme = choice;
  const secure = location.protocol === 'https:' ? '; Secure' : '';
  document.cookie = `${THEME_COOKIE}=${choice}; Path=/; Max-Age=${YEAR_SECONDS}; SameSite=Lax${secure}`;
}
