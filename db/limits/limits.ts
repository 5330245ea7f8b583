/** How often something may be tried in a span of time, by what it is counted for. */
export const LIMITS = {
  /** Wrong passwords for one name. */
  'sign-in.name': { most: 5, seconds: 600 },
  /** Wrong passwords from one network address. */
  'sign-in.address': { most: 10, seconds: 60 },
  /**
   * Wrong passwords for one name with no right one between them, however long it takes (NIST SP 800-63B-4, 3.2.2: at most
   * 100); a new password by mail ends it. The span only says when the row may be forgotten.
   */
  'sign-in.row': { most: 100, seconds: 10 * 365 * 24 * 3600 },
  'reset.name': { most: 3, seconds: 3600 },
  'reset.address': { most: 3, seconds: 3600 },
  /** Uses of links from one address: guessing 256 bits is hopeless, but each use costs a password hash. */
  'link.address': { most: 20, seconds: 600 },
} as const;

export type LimitKind = keyof typeof LIMITS;
