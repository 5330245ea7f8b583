import type { PersonRole } from '@/db/policies/may';

/** A role in words: "PI", "researcher, administrator". */
export function roleInWords({ role, admin }: { role: PersonRole; admin: boolean }): string {
  return (role === 'pi' ? 'PI' : role) + (admin ? ', administrator' : '');
}

/** What can be said of an account in a word. */
export function accountInWords({ active, invited }: { active: boolean; invited: boolean }): string {
  if (!active) return 'closed';
  return invited ? 'invited' : 'open';
}

/** A browser's name for itself, as a person would say it: "Firefox on Linux". */
export function browserInWords(userAgent: string): string {
  const browser = [
    ['Edg/', 'Edge'],
    ['OPR/', 'Opera'],
    ['Firefox/', 'Firefox'],
    ['Chrome/', 'Chromium'],
    ['Safari/', 'Safari'],
  ].find(([mark]) => userAgent.includes(mark ?? ''))?.[1];
  const system = [
    ['Android', 'Android'],
    ['iPhone', 'iPhone'],
    ['iPad', 'iPad'],
    ['Windows', 'Windows'],
    ['Mac OS X', 'macOS'],
    ['Linux', 'Linux'],
  ].find(([mark]) => userAgent.includes(mark ?? ''))?.[1];
  if (!browser) return 'An unknown browser';
  return system ? `${browser} on ${system}` : browser;
}
