import { eq } from 'drizzle-orm';
import type { AnalysisFailure, AnalysisResult } from '../../../analysis/types';
import type { Database } from '../../client';
import { result } from '../../schema/index';

/** Keeps a computed outcome at its address. Computed twice at once, the first stays: both are the same. */
export async function keepResult(
  db: Database,
  input: { address: string; engine: string; outcome: AnalysisResult | AnalysisFailure; milliseconds: number },
): Promise<void> {
  await db.insert(result).values(input).onConflictDoNothing();
}

/** Whether an outcome is kept at this address. */
export async function isResultKept(db: Database, address: string): Promise<boolean> {
  const rows = await db.select({ address: result.address }).from(result).where(eq(result.address, address));
  return rows.length > 0;
}
