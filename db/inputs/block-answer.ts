import { z } from 'zod';
import { analysisResult, analysisSettings, readingSummary } from './analysis-result';

const sha256 = z.string().regex(/^[0-9a-f]{64}$/);

/** `GET /api/entries/:id/blocks`: the diffusion blocks of an entry as the record has them. Checked on both sides. */
export const blockAnswer = z.object({
  /** Last committed update that this knows of. */
  seq: z.number().int().min(0),
  blocks: z.array(
    z.object({
      blockId: z.string(),
      /** Place among the entry's blocks, from 1. */
      position: z.number().int().positive(),
      status: z.enum(['empty', 'waiting', 'done', 'failed']),
      /** Why there is no result (yet), for people; empty when nothing is wrong. */
      message: z.string(),
      readingIds: z.array(z.uuid()),
      settings: analysisSettings,
      /** null unless done. */
      result: analysisResult.nullable(),
      /** Engine that computed the outcome, also of a failed one. */
      engine: z.string().nullable(),
      computedAt: z.string().nullable(),
      /** Those of `readingIds` that belong to this entry, in the block's order. */
      readings: z.array(
        z.object({
          id: z.uuid(),
          attachmentId: z.uuid(),
          name: z.string(),
          /** Of the file's bytes, as the server measured them. */
          sha256,
          /** Address of the reading. */
          hash: sha256,
          /** Rows that could not be used. */
          problems: z.number().int(),
          summary: readingSummary,
        }),
      ),
    }),
  ),
  /** Everything of this entry that a block can name: files that were confirmed, oldest first. */
  available: z.array(z.object({ id: z.uuid(), name: z.string(), sha256, at: z.string() })),
});

export type BlockAnswer = z.infer<typeof blockAnswer>;
export type BlockState = BlockAnswer['blocks'][number];
export type AvailableReading = BlockAnswer['available'][number];
