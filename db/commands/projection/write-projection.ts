import { and, eq, inArray, notInArray, sql } from 'drizzle-orm';
import type { AnalysisSettings } from '../../../analysis/types';
import type { Database, Transaction } from '../../client';
import { blockResult, entry, entryText, reading, attachment, result } from '../../schema/index';
import { resultAddress } from '../../integrity/addresses';

export interface ProjectedBlock {
  readonly blockId: string;
  readonly caption: string;
  readonly readingIds: readonly string[];
  readonly settings: AnalysisSettings;
  /** Settings in the document that could not be used, by name. */
  readonly faulty: readonly string[];
}

/** A result that is named by a block but has not been computed. */
export interface WantedResult {
  readonly address: string;
  readonly settings: AnalysisSettings;
  readonly readings: readonly {
    readonly hash: string;
    readonly spec: typeof reading.$inferSelect.spec;
    readonly file: { readonly name: string; readonly storageKey: string; readonly sha256: string };
  }[];
}

/**
 * Writes what was read of an entry up to `seq`: its words and its blocks with the results they name. Older news than what
 * is there already is ignored.
 * @returns results that are still to be computed; null when the news was old.
 */
export async function writeProjection(
  db: Database,
  input: {
    entryId: string;
    epoch: number;
    seq: number;
    plain: string;
    blocks: readonly ProjectedBlock[];
    engine: string;
  },
): Promise<WantedResult[] | null> {
  return db.transaction(async (tx) => {
    const [head] = await tx
      .select({ notebookId: entry.notebookId, epoch: entry.epoch })
      .from(entry)
      .where(eq(entry.id, input.entryId));
    if (!head || head.epoch !== input.epoch) return null;
    const [known] = await tx
      .select()
      .from(entryText)
      .where(eq(entryText.entryId, input.entryId))
      .for('update');
    if (known && known.epoch === input.epoch && known.seq > input.seq) return null;
    const text = { epoch: input.epoch, seq: input.seq, plain: input.plain, at: sql`motebook_now()` };
    await tx
      .insert(entryText)
      .values({ entryId: input.entryId, ...text })
      .onConflictDoUpdate({ target: entryText.entryId, set: text });

    const wanted = new Map<string, WantedResult>();
    for (const [at, block] of input.blocks.entries()) {
      const row = await describeBlock(tx, input.entryId, block, input.engine, wanted);
      const values = {
        notebookId: head.notebookId,
        position: at + 1,
        caption: block.caption,
        readingIds: [...block.readingIds],
        settings: block.settings,
        at: sql`motebook_now()`,
        ...row,
      };
      await tx
        .insert(blockResult)
        .values({ entryId: input.entryId, blockId: block.blockId, ...values })
        .onConflictDoUpdate({ target: [blockResult.entryId, blockResult.blockId], set: values });
    }
    const ids = input.blocks.map((block) => block.blockId);
    await tx
      .delete(blockResult)
      .where(
        and(
          eq(blockResult.entryId, input.entryId),
          ids.length > 0 ? notInArray(blockResult.blockId, ids) : undefined,
        ),
      );
    return [...wanted.values()];
  });
}

type BlockRow = Pick<
  typeof blockResult.$inferInsert,
  'status' | 'message' | 'address' | 'verdict' | 'd' | 'dLo' | 'dHi'
>;
const nothing = { address: null, verdict: null, d: null, dLo: null, dHi: null } as const;

async function describeBlock(
  tx: Transaction,
  entryId: string,
  block: ProjectedBlock,
  engine: string,
  wanted: Map<string, WantedResult>,
): Promise<BlockRow> {
  if (block.faulty.length > 0) {
    const names = block.faulty.join(', ');
    return {
      ...nothing,
      status: 'failed',
      message: `These settings of the block cannot be used: ${names}. Set them again.`,
    };
  }
  if (block.readingIds.length === 0) return { ...nothing, status: 'empty', message: '' };
  const rows = await tx
    .select({ id: reading.id, hash: reading.hash, spec: reading.spec, file: attachment })
    .from(reading)
    .innerJoin(attachment, eq(attachment.id, reading.attachmentId))
    .where(and(inArray(reading.id, [...block.readingIds]), eq(attachment.entryId, entryId)));
  const readings = block.readingIds.map((id) => rows.find((row) => row.id === id));
  if (readings.some((one) => one === undefined)) {
    // Only files of this entry count: whoever may read the entry may then read them too.
    return {
      ...nothing,
      status: 'failed',
      message:
        'A file of this block is not attached to this entry. Add the file here, then confirm it again.',
    };
  }
  const found = readings as NonNullable<(typeof readings)[number]>[];
  const address = resultAddress(
    found.map((one) => one.hash),
    block.settings,
    engine,
  );
  const [computed] = await tx
    .select({ outcome: result.outcome })
    .from(result)
    .where(eq(result.address, address));
  if (computed) return rowOf(address, computed.outcome);
  wanted.set(address, {
    address,
    settings: block.settings,
    readings: found.map(({ hash, spec, file }) => ({ hash, spec, file })),
  });
  return { ...nothing, status: 'waiting', message: '' };
}

/** The columns of a block that a computed outcome fills: only what the server computed is ever shown or searched. */
export function rowOf(address: string, outcome: typeof result.$inferSelect.outcome): BlockRow {
  if ('failed' in outcome) return { ...nothing, status: 'failed', message: outcome.message, address };
  const { D, verdict } = outcome;
  return {
    status: 'done',
    message: '',
    address,
    verdict,
    d: D?.value ?? null,
    dLo: D?.lo ?? null,
    dHi: D?.hi ?? null,
  };
}
