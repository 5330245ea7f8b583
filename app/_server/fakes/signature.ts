import { createHmac, timingSafeEqual } from 'node:crypto';

/** "hmac-sha256=" and the hexadecimal HMAC-SHA256 of a text, as the hosted service signs addresses and callbacks. */
export function sign(text: string, key: string): string {
  return `hmac-sha256=${createHmac('sha256', key).update(text, 'utf8').digest('hex')}`;
}

/** Compared in constant time, so that a wrong signature does not tell how wrong it is. */
export function isSigned(text: string, given: string, key: string): boolean {
  const right = Buffer.from(sign(text, key));
  const other = Buffer.from(given);
  return right.length === other.length && timingSafeEqual(right, other);
}

/**
 * Checks a presigned address: its signature covers everything before `&signature=`, and it has a time limit.
 * @param target - path and query as they came over the wire.   @returns null when it is good, else why not.
 */
export function addressFault(origin: string, target: string, key: string, now = Date.now()): string | null {
  const at = target.lastIndexOf('signature=');
  if (at < 1) return 'not signed';
  const signed = origin + target.slice(0, at - 1);
  if (!isSigned(signed, decoded(target.slice(at + 'signature='.length)), key)) return 'wrong signature';
  const expires = Number(new URL(origin + target).searchParams.get('expires'));
  return Number.isFinite(expires) && expires > now ? null : 'expired';
}

/** Text without its percent signs; one that cannot be decoded is signed by nobody. */
function decoded(text: string): string {
  try {
    return decodeURIComponent(text);
  } catch {
    return '';
  }
}
