import { and, eq, inArray, sql } from 'drizzle-orm';
import type { AnalysisSettings, Verdict } from '../../../analysis/types';
import type { Transaction } from '../../client';
import { BLOCK_WORDS } from '../../inputs/block-words';
import type { BlockAttributes } from '../../inputs/block-settings';
import { resultAddress } from '../../integrity/addresses';
import { attachment, reading, result, type blockResult } from '../../schema/index';

/** A diffusion block as it stands in the committed document. */
export interface ProjectedBlock {
  readonly blockId: string;
  readonly caption: string;
  readonly readingIds: readonly string[];
  readonly settings: AnalysisSettings;
  /** Attributes in the document that could not be used. */
  readonly faulty: readonly (keyof BlockAttributes)[];
}

/** A result that a block names and that has not been computed. */
export interface WantedResult {
  readonly address: string;
  readonly settings: AnalysisSettings;
  readonly readings: readonly {
    readonly hash: string;
    readonly spec: typeof reading.$inferSelect.spec;
    readonly file: { readonly name: string; readonly storageKey: string; readonly sha256: string };
  }[];
}

/** Why an address has no result: "waiting" mends itself, "failed" does not. */
export interface Trouble {
  readonly status: 'waiting' | 'failed';
  readonly message: string;
}

/** The columns of a block that say what came of it. */
export type BlockOutcome = Pick<
  typeof blockResult.$inferSelect,
  'status' | 'message' | 'address' | 'verdict' | 'd' | 'dLo' | 'dHi'
>;

/** Files of one block are in memory together while they are analysed. */
export const MAX_BYTES_PER_BLOCK = 200 * 1024 * 1024;

const nothing = { message: '', address: null, verdict: null, d: null, dLo: null, dHi: null } as const;

type Asked = { readonly outcome: BlockOutcome } | { readonly wanted: WantedResult };

/**
 * What is known of each block of an entry, in order, and which results are still to be computed. Only what the server
 * computed is ever among the numbers; an attribute of the document cannot put one there.
 */
export async function describeBlocks(
  tx: Transaction,
  entryId: string,
  blocks: readonly ProjectedBlock[],
  engine: string,
  troubleOf: (address: string) => Trouble | null,
): Promise<{ outcomes: BlockOutcome[]; wanted: WantedResult[] }> {
  const readings = await findReadings(tx, entryId, blocks);
  const asked = blocks.map((block) => ask(block, readings, engine));
  const results = await findResults(
    tx,
    asked.flatMap((one) => ('wanted' in one ? [one.wanted.address] : [])),
  );
  const wanted = new Map<string, WantedResult>();
  const outcomes = asked.map((one): BlockOutcome => {
    if ('outcome' in one) return one.outcome;
    const found = results.get(one.wanted.address);
    if (found) return found;
    wanted.set(one.wanted.address, one.wanted);
    return { ...nothing, ...(troubleOf(one.wanted.address) ?? { status: 'waiting' }) };
  });
  return { outcomes, wanted: [...wanted.values()] };
}

type FoundReading = Awaited<ReturnType<typeof findReadings>>[number];

/** Only files of this entry count: whoever may read the entry may then read them too. */
async function findReadings(tx: Transaction, entryId: string, blocks: readonly ProjectedBlock[]) {
  const ids = [...new Set(blocks.flatMap((block) => block.readingIds))];
  if (ids.length === 0) return [];
  const { name, storageKey, sha256, bytes } = attachment;
  return tx
    .select({
      id: reading.id,
      hash: reading.hash,
      spec: reading.spec,
      file: { name, storageKey, sha256, bytes },
    })
    .from(reading)
    .innerJoin(attachment, eq(attachment.id, reading.attachmentId))
    .where(and(inArray(reading.id, ids), eq(attachment.entryId, entryId)));
}

/** The question that a block asks, or why it asks none. */
function ask(block: ProjectedBlock, known: readonly FoundReading[], engine: string): Asked {
  const failed = (message: string): Asked => ({ outcome: { ...nothing, status: 'failed', message } });
  if (block.faulty.length > 0) {
    const names = block.faulty.map((name) => BLOCK_WORDS[name]).join(', ');
    return failed(`What the block says about this cannot be used: ${names}. Set it again.`);
  }
  if (block.readingIds.length === 0) return { outcome: { ...nothing, status: 'empty' } };
  const found = block.readingIds.flatMap((id) => known.find((one) => one.id === id) ?? []);
  if (found.length < block.readingIds.length) {
    return failed(
      'A file of this block does not belong to this entry. Take it out of the block in the settings, and add the file to this entry.',
    );
  }
  const twice = found.find((one, at) => found.findIndex(({ file }) => file.sha256 === one.file.sha256) < at);
  if (twice) {
    return failed(
      `"${twice.file.name}" is in this block twice, so its tracks would count twice. Take one of the two out in the settings.`,
    );
  }
  if (found.reduce((sum, one) => sum + one.file.bytes, 0) > MAX_BYTES_PER_BLOCK) {
    return failed(
      `The files of this block are larger than ${MAX_BYTES_PER_BLOCK / 1024 ** 2} MB together. Put them into several blocks.`,
    );
  }
  return {
    wanted: {
      address: resultAddress(
        found.map((one) => one.hash),
        block.settings,
        engine,
      ),
      settings: block.settings,
      readings: found.map(({ hash, spec, file }) => ({ hash, spec, file })),
    },
  };
}

/** What was computed at these addresses. The long curves stay where they are. */
async function findResults(
  tx: Transaction,
  addresses: readonly string[],
): Promise<Map<string, BlockOutcome>> {
  if (addresses.length === 0) return new Map();
  const { outcome } = result;
  const number = (path: string) => sql<number | null>`(${outcome} #>> ${path})::float8`;
  const rows = await tx
    .select({
      address: result.address,
      failed: sql<boolean>`${outcome} ? 'failed'`,
      message: sql<string | null>`${outcome} ->> 'message'`,
      verdict: sql<Verdict | null>`${outcome} ->> 'verdict'`,
      d: number('{D,value}'),
      dLo: number('{D,lo}'),
      dHi: number('{D,hi}'),
    })
    .from(result)
    .where(inArray(result.address, [...new Set(addresses)]));
  return new Map(
    rows.map(({ failed, message, ...row }) => [
      row.address,
      failed
        ? { ...nothing, status: 'failed', message: message ?? '', address: row.address }
        : { ...row, status: 'done', message: '' },
    ]),
  );
}
