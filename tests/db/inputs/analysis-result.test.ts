import { expect, test } from 'vitest';
import { analysisResult } from '@/db/inputs/analysis-result';
import { attributesOf, resultOf } from '../../components/diffusion-block/some-results';

const stated = attributesOf({ medium: 'water', temperature: 25, particleDiameter: 1, sigma: 0.03 });
const results = {
  'an ensemble': resultOf(),
  'one short track': resultOf(undefined, { tracks: 1, frames: 12 }),
  'two-point tracks': resultOf(undefined, { tracks: 30, frames: 2 }),
  'a flow': resultOf(undefined, { physics: { velocity: [3, 0] } }),
  'everything stated': resultOf(stated),
  'motion below the error': resultOf(undefined, { physics: { D: 1e-9, sigma: 0.5 } }),
};

test.each(Object.entries(results))(
  'the engine’s result of %s has the promised shape, through JSON',
  (_name, result) => {
    expect(analysisResult.parse(JSON.parse(JSON.stringify(result)))).toEqual(result);
  },
);

test('a number that is not one, a missing field and uneven columns are refused', () => {
  const result = results['an ensemble'];
  const msd = result.msd!;
  for (const broken of [
    { ...result, D: { ...result.D!, value: Number.NaN } },
    { ...result, D: { ...result.D!, hi: '0.5' } },
    { ...result, verdict: 'probably free' },
    { ...result, tracks: undefined },
    { ...result, msd: { ...msd, pairs: msd.pairs.slice(1) } },
  ]) {
    expect(analysisResult.safeParse(broken).success).toBe(false);
  }
});
