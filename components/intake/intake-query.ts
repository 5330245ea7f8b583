'use client';

import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { z } from 'zod';
import type { Inspection, IntakeFailure, ReadingSpec } from '@/analysis/intake/types';
import type { ReadSummary } from '@/analysis/worker/messages';
import { fetchJson } from '@/components/fetch-json';
import { readingAnswer, type ReadingAnswer } from '@/db/inputs/intake';

const isObject = (value: unknown) => typeof value === 'object' && value !== null && 'failed' in value;
const intakeAnswer = z.object({
  inspection: z.custom<Inspection | IntakeFailure>(isObject),
  read: z.custom<ReadSummary | IntakeFailure>(isObject).nullable(),
});
export type IntakeAnswer = z.infer<typeof intakeAnswer>;

/** What the server understands of a file, with the corrections made so far. An older answer stays until the new one comes. */
export function useIntake(attachmentId: string, spec: ReadingSpec | null) {
  return useQuery({
    queryKey: ['intake', attachmentId, spec],
    queryFn: ({ signal }) =>
      fetchJson(`/api/attachments/${attachmentId}/intake`, intakeAnswer, { body: { spec }, signal }),
    placeholderData: keepPreviousData,
    staleTime: Infinity,
  });
}

export function confirmReading(attachmentId: string, spec: ReadingSpec): Promise<ReadingAnswer> {
  return fetchJson(`/api/attachments/${attachmentId}/readings`, readingAnswer, { body: { spec } });
}
