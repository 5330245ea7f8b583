/** Where somebody goes after signing in when no other place is asked for. */
export const HOME = '/';

/**
 * The place to return to after signing in: a path on this origin, or home. Never another host, however it is spelled
 * ("//x", "\\x", "https:x", "/\tx"), never the sign-in page itself, never an address that answers data.
 */
export function safeReturnPath(asked: unknown): string {
  if (typeof asked !== 'string' || asked.length > 2000 || !asked.startsWith('/')) return HOME;
  // Browsers drop tabs and line breaks and read "\" as "/" when they parse an address.
  if (/^\/[/\\]/.test(asked) || /[\p{Cc}\\]/u.test(asked)) return HOME;
  const base = 'http://motebook.invalid';
  if (!URL.canParse(asked, base)) return HOME;
  const url = new URL(asked, base);
  if (url.origin !== base || url.pathname.startsWith('//')) return HOME;
  if (/^\/(sign-in|api)(\/|$)/.test(url.pathname)) return HOME;
  return url.pathname + url.search + url.hash;
}
