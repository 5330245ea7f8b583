import { describe, expect, test } from 'vitest';
import { findBlock, isCurrent, phaseOf } from '@/components/diffusion-block/block-phase';
import { withoutFile } from '@/components/diffusion-block/files-field';
import { BLOCK_DEFAULTS, type BlockAttributes } from '@/db/inputs/block-settings';
import { attributesOf, id, stateOf } from './some-results';

describe('how a block stands', () => {
  test('as the server says, when it speaks of the block as it is here', () => {
    const attributes = attributesOf();
    for (const status of ['waiting', 'done', 'failed'] as const) {
      expect(phaseOf(stateOf(attributes, { status }), attributes)).toBe(status);
    }
  });

  test('the order in which the database returns settings does not matter', () => {
    const attributes = attributesOf({ exposureSeconds: 0.01, medium: 'water' });
    const state = stateOf(attributes);
    const turned = Object.fromEntries(Object.entries(state.settings).reverse()) as typeof state.settings;
    expect(isCurrent({ ...state, settings: turned }, attributes)).toBe(true);
  });

  /** One change of each setting: none may pass for the one that was computed. */
  const changes: Partial<BlockAttributes>[] = [
    { readingIds: [id(101), id(102)] },
    { dims: 1 },
    { fitLagFirst: 2 },
    { fitLagLast: 9 },
    { drift: 'keep' },
    { minTrackFrames: 3 },
    { exposureSeconds: 0.01 },
    { exposureFraction: 0 },
    { sigma: 0 },
    { medium: 'water' },
    { viscosity: 1 },
    { temperature: 25 },
    { particleDiameter: 1 },
    { geometry: 'circle' },
    { excludedTracks: [{ reading: 0, track: '1', reason: 'stuck' }] },
  ];
  test.each(changes)('after %j it is updating, never shown as done', (change) => {
    expect(phaseOf(stateOf(attributesOf()), attributesOf(change))).toBe('updating');
  });
  test('these are all the settings there are', () => {
    const named = new Set(changes.flatMap((change) => Object.keys(change)));
    const all = Object.keys(BLOCK_DEFAULTS).filter((name) => name !== 'blockId' && name !== 'caption');
    expect([...named].sort()).toEqual(all.sort());
  });

  test('a caption changes nothing, a block without files is empty, an unknown one is updating', () => {
    expect(phaseOf(stateOf(attributesOf()), attributesOf({ caption: 'Beads' }))).toBe('done');
    expect(phaseOf(stateOf(attributesOf()), attributesOf({ readingIds: [] }))).toBe('empty');
    expect(phaseOf(null, attributesOf())).toBe('updating');
    expect(phaseOf(stateOf(attributesOf({ readingIds: [] }), { status: 'empty' }), attributesOf())).toBe(
      'updating',
    );
  });
});

describe('which of the blocks it is', () => {
  test('among copies with one id, the one that asks the same question', () => {
    const [one, copy] = [attributesOf(), attributesOf({ dims: 1 })];
    const states = [stateOf(one), stateOf(copy, { blockId: `${one.blockId}#2` })];
    expect(findBlock(states, copy)).toBe(states[1]);
    expect(findBlock(states, one)).toBe(states[0]);
    expect(findBlock(states, attributesOf({ dims: 3 }))).toBe(states[0]);
    expect(findBlock(states, attributesOf({ blockId: id(9) }))).toBeNull();
  });
});

test('taking a file out moves the tracks that were left out of the others with their files', () => {
  const left = (reading: number, track: string) => ({ reading, track, reason: 'stuck' });
  const block = attributesOf({
    readingIds: [id(101), id(102), id(103)],
    excludedTracks: [left(0, 'a'), left(1, 'b'), left(2, 'c')],
  });
  expect(withoutFile(block, 1)).toEqual({
    readingIds: [id(101), id(103)],
    excludedTracks: [left(0, 'a'), left(1, 'c')],
  });
  expect(withoutFile(attributesOf(), 0)).toEqual({ readingIds: [] });
});
