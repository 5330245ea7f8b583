import { expect, test } from 'vitest';
import { describeData, describeExclusions } from '@/components/diffusion-block/describe-data';
import { describeSettings } from '@/components/diffusion-block/describe-settings';
import { attributesOf, resultOf } from './some-results';

/** Thin spaces stand between numbers and units; here they are read as spaces. */
const words = (text: string) => text.replaceAll('\u2009', ' ');

test('what was left to the data is told once there is a result', () => {
  const attributes = attributesOf();
  expect(words(describeSettings(attributes, null))).toBe(
    'all measured axes · drift removed when significant · exposure as the file says',
  );
  const result = resultOf(attributes);
  expect(words(describeSettings(attributes, result))).toBe(
    `2-D · lags ${result.lineFit!.lagFirst}–${result.lineFit!.lagLast} · drift removed when significant · exposure 40 % of the interval`,
  );
  expect(words(describeSettings(attributes, { ...result, exposureStated: false }))).toContain(
    'exposure not stated',
  );
});

test('what was stated is told with its unit', () => {
  const attributes = attributesOf({
    dims: 1,
    drift: 'keep',
    fitLagFirst: 2,
    minTrackFrames: 10,
    excludedTracks: [{ reading: 0, track: '7', reason: 'stuck' }],
    sigma: 0.03,
    exposureSeconds: 0.02,
    exposureFraction: 1,
    viscosity: 1.2,
    temperature: -5,
    particleDiameter: 0.5,
  });
  expect(words(describeSettings(attributes, null))).toBe(
    '1-D · lags from 2 · drift kept · tracks of 10 frames or more · one track left out by hand · σ = 0.03 µm given · exposure 0.02 s · medium of 1.2 mPa·s at −5 °C · particles of 0.5 µm',
  );
  expect(words(describeSettings({ ...attributes, medium: 'water' }, null))).toContain('water at −5 °C');
});

test('what a result rests on is counted, singular and plural', () => {
  const result = resultOf();
  expect(describeData(result)).toBe('40 tracks, 4,000 positions, 3,960 displacements in 2-D.');
  expect(describeData({ ...result, tracks: 1, gaps: 1 })).toContain('1 track, ');
  expect(describeData({ ...result, gaps: 1 })).toContain(', 1 gap.');
  expect(
    describeExclusions({
      ...result,
      exclusions: [
        { what: 'rows', count: 1200, reason: 'position not readable' },
        { what: 'axes', count: 1, reason: 'axis that never changes' },
      ],
    }),
  ).toEqual(['1,200 rows left out: position not readable', '1 axis left out: axis that never changes']);
});
