import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';
import type { ReadingSpec } from '../../analysis/intake/types';
import type { AnalysisSettings } from '../../analysis/types';

function sha256OfCanonicalJson(value: unknown): string {
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError('value has no canonical JSON');
  return createHash('sha256').update(text, 'utf8').digest('hex');
}

/**
 * Hash of a reading: SHA-256 over the canonical JSON (RFC 8785) of the file's hash and how it is read.
 * @param fileSha256 - 64 hexadecimal digits of the file's bytes.   @returns 64 hexadecimal digits.
 */
export function readingHash(fileSha256: string, spec: ReadingSpec): string {
  return sha256OfCanonicalJson({ type: 'motebook/reading/1', file: fileSha256, spec });
}

/**
 * Address of a result: SHA-256 over the canonical JSON of what determines it, so that the same question is computed once.
 * @param readingHashes - in the block's order.   @returns 64 hexadecimal digits.
 */
export function resultAddress(
  readingHashes: readonly string[],
  settings: AnalysisSettings,
  engine: string,
): string {
  return sha256OfCanonicalJson({ type: 'motebook/result/1', readings: readingHashes, settings, engine });
}
