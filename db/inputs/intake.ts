import { z } from 'zod';
import { decimalText, readingSpec } from './reading-spec';

/** What a browser may ask of intake: nothing, something stated, or a whole corrected reading. */
export const intakeRequest = z.object({
  spec: readingSpec.nullish(),
  stated: z
    .object({
      frameInterval: decimalText.nullish(),
      pixelSize: decimalText.nullish(),
    })
    .nullish(),
});

export const readingRequest = z.object({ spec: readingSpec });

export const readingAnswer = z.object({ readingId: z.uuid(), hash: z.string().regex(/^[0-9a-f]{64}$/) });
export type ReadingAnswer = z.infer<typeof readingAnswer>;
