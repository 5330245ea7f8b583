import { analyse } from '@/analysis/analyse';
import { simulateDataSet } from '@/analysis/simulate/data-set';
import type { WalkPhysics } from '@/analysis/simulate/walk';
import type { AnalysisResult } from '@/analysis/types';
import type { BlockAnswer, BlockState } from '@/db/inputs/block-answer';
import { BLOCK_DEFAULTS, settingsOf, type BlockAttributes } from '@/db/inputs/block-settings';

/** Results for views and charts: computed by the engine from simulated tracks, never written by hand. */

export const id = (n: number): string => `00000000-0000-4000-8000-${String(n).padStart(12, '0')}`;
export const ENTRY = id(999);

export const attributesOf = (given: Partial<BlockAttributes> = {}): BlockAttributes => ({
  ...BLOCK_DEFAULTS,
  blockId: id(1),
  readingIds: [id(101)],
  ...given,
});

export function resultOf(
  attributes: BlockAttributes = attributesOf(),
  given: { seed?: number; tracks?: number; frames?: number; physics?: Partial<WalkPhysics> } = {},
): AnalysisResult {
  const physics = { D: 0.5, interval: 0.05, exposure: 0.4, sigma: 0.03, velocity: [0, 0], box: null };
  const data = simulateDataSet({
    seed: given.seed ?? 5,
    tracks: given.tracks ?? 40,
    frames: given.frames ?? 100,
    physics: () => ({ ...physics, ...given.physics }),
  });
  const outcome = analyse([{ ...data, hash: 'a'.repeat(64) }], settingsOf(attributes));
  if ('failed' in outcome) throw new Error(outcome.message);
  return outcome;
}

/** What the server would say of a block with these attributes. */
export function stateOf(attributes: BlockAttributes, given: Partial<BlockState> = {}): BlockState {
  return {
    blockId: attributes.blockId,
    position: 2,
    status: 'done',
    message: '',
    readingIds: attributes.readingIds,
    settings: settingsOf(attributes),
    result: null,
    engine: 'motebook-engine/1',
    computedAt: '2026-03-02T13:05:00.000Z',
    readings: attributes.readingIds.map((readingId) => ({
      id: readingId,
      attachmentId: id(201),
      name: 'beads.csv',
      sha256: 'b'.repeat(64),
      hash: 'a'.repeat(64),
      problems: 0,
      summary: {
        rows: 4000,
        tracks: 40,
        frames: 100,
        longestTrackFrames: 100,
        shortestTrackFrames: 100,
        gaps: 0,
        missingFrames: 0,
        frameInterval: 0.05,
        dims: 2,
        badRows: 0,
        bounds: [],
      },
    })),
    ...given,
  };
}

export const answerOf = (blocks: BlockState[], given: Partial<BlockAnswer> = {}): BlockAnswer => ({
  seq: 1,
  blocks,
  available: [{ id: id(101), name: 'beads.csv', sha256: 'b'.repeat(64), at: '2026-03-02T13:00:00.000Z' }],
  ...given,
});
