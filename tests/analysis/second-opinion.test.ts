import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';
import { fitTwo, minus2LogLikelihood, noiseShape } from '../../analysis/estimators/likelihood';
import { profileInterval } from '../../analysis/estimators/profile-interval';
import { seededRandom } from '../../analysis/random';
import { spectrumOf } from '../../analysis/spectrum/spectrum';
import { freeShape } from '../../analysis/verdict/free-fit';
import { apart, succeed } from './golden';

/**
 * The same questions put to numpy and scipy, which share no code with the engine: dense covariance matrices and Cholesky
 * factors instead of sine transforms, another optimiser, sums by slices. Needs python3 with both (Debian: python3-numpy,
 * python3-scipy).
 */
const hasBoth = (python: string) => spawnSync(python, ['-c', 'import numpy, scipy']).status === 0;
// Debian's own first: its packages are no use to another python that may stand before it in the path.
const python = ['/usr/bin/python3', 'python3'].find(hasBoth);
const missing = python === undefined;
if (missing) console.log('skipped: the second opinion, because no python3 with numpy and scipy was found');

interface Opinion {
  readonly msd: readonly number[];
  readonly delta: number;
  readonly s: number;
  readonly best: number;
  readonly lo: number;
  readonly hi: number;
  readonly at: readonly number[];
}

/** Free walks with noise and no blur (the exposure only changes the model that is fitted); lengths differ, so that several matrices are needed. */
function walks(seed: number, dims: number, lengths: readonly number[], sigma: number, D: number) {
  const random = seededRandom(seed);
  return lengths.map((frames) =>
    Array.from({ length: dims }, () => {
      let x = 0;
      return Array.from({ length: frames }, () => {
        x += Math.sqrt(2 * D) * random.gaussian();
        return x + sigma * random.gaussian();
      });
    }),
  );
}

const CASES = [
  { name: 'one long track', dims: 2, lengths: [120], sigma: 0.3, D: 1, exposure: 0 },
  { name: 'several short tracks', dims: 2, lengths: [20, 25, 25, 31, 40], sigma: 0.5, D: 0.4, exposure: 0.6 },
  { name: 'one axis, much noise', dims: 1, lengths: [60, 60, 80], sigma: 1, D: 0.5, exposure: 1 },
  { name: 'three axes, little noise', dims: 3, lengths: [15, 15, 15], sigma: 0.05, D: 2, exposure: 0.3 },
].map((one, i) => ({
  ...one,
  tracks: walks(900 + i, one.dims, one.lengths, one.sigma, one.D),
  lags: [1, 2, 5, 9],
  points: [
    [one.D, one.sigma ** 2],
    [one.D * 2, 0],
    [one.D / 3, 0.7],
  ] as const,
}));

describe.skipIf(missing)('a second opinion by numpy and scipy', () => {
  const opinions = missing
    ? []
    : (JSON.parse(
        spawnSync(python, [fileURLToPath(new URL('second-opinion.py', import.meta.url))], {
          encoding: 'utf8',
          input: JSON.stringify(CASES),
          // Small matrices: threads would only wait for each other.
          env: { ...process.env, OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1' },
        }).stdout,
      ) as Opinion[]);

  test.each(CASES.map((one, i) => ({ ...one, i })))(
    '$name: MSD, likelihood, D, σ² and interval agree',
    (one) => {
      const opinion = opinions[one.i]!;
      const segments = one.tracks.map((axes, track) => ({
        track,
        displacements: axes.map((axis) => Float64Array.from(axis.slice(1), (x, k) => x - axis[k]!)),
      }));
      const spectrum = spectrumOf(segments, one.dims);
      const a = freeShape(spectrum, one.exposure);
      const b = noiseShape(spectrum);
      one.points.forEach(([delta, s], i) =>
        expect(apart(minus2LogLikelihood(spectrum, a, b, delta, s), opinion.at[i]!)).toBeLessThan(1e-10),
      );
      const fit = fitTwo(spectrum, a, b);
      expect(Math.abs(fit.minus2LogL - opinion.best)).toBeLessThan(1e-7);
      expect(apart(fit.delta, opinion.delta)).toBeLessThan(1e-5);
      expect(Math.abs(fit.s - opinion.s) / fit.delta).toBeLessThan(1e-5);
      const interval = profileInterval(spectrum, a, b, fit, null);
      expect(apart(interval.lo!, opinion.lo)).toBeLessThan(1e-5);
      expect(apart(interval.hi!, opinion.hi)).toBeLessThan(1e-5);

      const frames = one.lengths.flatMap((n) => Array.from({ length: n }, (_, i) => i));
      const { msd } = succeed([
        {
          hash: one.name,
          trackIds: one.lengths.map((_, i) => String(i)),
          track: Int32Array.from(one.lengths.flatMap((n, i) => new Array<number>(n).fill(i))),
          frame: Int32Array.from(frames),
          time: null,
          axes: Array.from({ length: one.dims }, (_, axis) =>
            Float64Array.from(one.tracks.flatMap((axes) => axes[axis]!)),
          ),
          frameInterval: 1,
          exposure: { fraction: one.exposure },
        },
      ]);
      one.lags.forEach((lag, i) => {
        const at = msd!.lag.indexOf(lag);
        if (at >= 0) expect(apart(msd!.total[at]!, opinion.msd[i]!)).toBeLessThan(1e-10);
      });
      expect(msd!.lag).toContain(5);
    },
  );
});
