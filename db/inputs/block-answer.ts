import { z } from 'zod';
import type { ReadingSummary } from '../../analysis/intake/types';
import type { AnalysisResult, AnalysisSettings } from '../../analysis/types';

/** What the page gets of each diffusion block. Results are the server's own JSON; their engine names their shape. */
export const blockAnswer = z.object({
  seq: z.number().int(),
  blocks: z.array(
    z.object({
      blockId: z.string(),
      position: z.number().int().positive(),
      status: z.enum(['empty', 'waiting', 'done', 'failed']),
      message: z.string(),
      readingIds: z.array(z.uuid()),
      settings: z.custom<AnalysisSettings>((value) => typeof value === 'object' && value !== null),
      result: z.custom<AnalysisResult>((value) => typeof value === 'object' && value !== null).nullable(),
      computedAt: z.string().nullable(),
      readings: z.array(
        z.object({
          id: z.uuid(),
          attachmentId: z.uuid(),
          name: z.string(),
          sha256: z.string(),
          hash: z.string(),
          problems: z.number().int(),
          summary: z.custom<ReadingSummary>((value) => typeof value === 'object' && value !== null),
        }),
      ),
    }),
  ),
});

export type BlockAnswer = z.infer<typeof blockAnswer>;
export type BlockState = BlockAnswer['blocks'][number];
