import type { ShownLogin } from '@/components/people/login-list';
import { browserInWords } from '@/components/people/words';
import { formatMoment } from '@/components/ui/format-date';
import type { LoginLine } from '@/db/queries/person/get-person';

/** Logins with their times in the lab's time zone, in words. */
export function showLogins(logins: readonly LoginLine[], timeZone: string): ShownLogin[] {
  return logins.map(({ id, userAgent, startedAt, seenAt, own }) => ({
    id,
    own,
    browser: browserInWords(userAgent),
    started: formatMoment(startedAt, timeZone),
    seen: formatMoment(seenAt, timeZone),
  }));
}
