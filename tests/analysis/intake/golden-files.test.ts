import { existsSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, test } from 'vitest';
import type { ReadOutcome } from '../../../analysis/intake/read-trajectories';
import { goldenCase, goldenNames } from '../golden';
import { golden, read, values } from './files';

/**
 * Counts of an independent program (golden.json) against those of intake. A displacement joins two positions one frame apart
 * in one track, so there are as many as rows, less one for each track and one for each gap.
 */
const stated = (name: string) =>
  name === 'g13_pixels_frames' ? { frameInterval: '0.04', pixelSize: '0.107' } : {};

/** Runs of at least two consecutive frames in one track; rows stand track by track, in order of time. */
function runs(outcome: ReadOutcome): number {
  const { track, time, frame } = outcome.trajectories;
  const clock = time ?? frame!;
  const step = time ? outcome.summary.frameInterval! : 1;
  const follows = (row: number) =>
    row > 0 && track[row] === track[row - 1] && Math.round((clock[row]! - clock[row - 1]!) / step) === 1;
  return Array.from(track, (_, row) => follows(row) && !follows(row - 1)).filter(Boolean).length;
}

describe('golden files are taken in to the counts of golden.json', () => {
  test.each(goldenNames)('%s', (name) => {
    const facts = goldenCase(name);
    const outcome = read(golden(facts.file), stated(name));
    const { summary, problemCount } = outcome;
    const {
      lag1,
      decision_prototype: counted,
      pairs,
    } = facts.reference as typeof facts.reference & {
      lag1: { n: number };
    };
    expect(problemCount).toBe(0);
    expect(summary.frameInterval).toBeCloseTo(facts.dt_s, 9);
    expect(summary.rows - summary.tracks - summary.gaps).toBe(lag1.n);
    expect(pairs[0]).toBe(lag1.n);
    expect(summary.dims).toBe(facts.reference.msd_axis.length);
    // The prototype counts runs of consecutive frames that hold a displacement; the case by hand has no prototype.
    if (counted) expect(runs(outcome)).toBe(counted.nseg);
    // At the largest lag of a file of one track, only its ends are left.
    if (summary.tracks === 1 && summary.gaps === 0) expect(pairs.at(-1)).toBe(summary.rows - pairs.length);
  });

  test('tracks of the mixture: 12 slow, 12 fast, 6 immobile, as golden.json has them', () => {
    const { truth, file } = goldenCase('g11_mixture');
    const { populations } = truth as typeof truth & { populations: { n: number }[] };
    const { summary, trajectories } = read(golden(file));
    expect(summary.tracks).toBe(populations.reduce((sum, { n }) => sum + n, 0));
    expect(trajectories.trackIds).toEqual(Array.from({ length: 30 }, (_, i) => String(i + 1)));
  });

  test('the one with gaps has them, and no other', () => {
    for (const name of goldenNames) {
      const { gaps, missingFrames } = read(golden(goldenCase(name).file), stated(name)).summary;
      expect(gaps > 0, name).toBe(name === 'g05_free_gaps');
      expect(missingFrames >= gaps).toBe(true);
    }
  });

  test('g00 by hand: six positions one second apart', () => {
    // MSD at one frame from the file's own whole numbers is 22/5, as the case notes.
    const { time, axes } = values(read(golden('g00_hand.csv')));
    expect(time).toEqual([0, 1, 2, 3, 4, 5]);
    const squares = axes.map((axis) => axis.slice(1).map((value, i) => (value - axis[i]!) ** 2));
    expect(squares.flat().reduce((sum, value) => sum + value)).toBe(22);
  });

  test('pixels and frames: each position is its text times the pixel size', () => {
    const text = new TextDecoder().decode(golden('g13_pixels_frames.csv'));
    const rows = text
      .trim()
      .split('\n')
      .slice(1)
      .map((line) => line.split(','));
    const got = values(read(golden('g13_pixels_frames.csv'), stated('g13_pixels_frames')));
    expect(got.frame).toEqual(rows.map(([frame]) => Number(frame)));
    expect(got.axes).toEqual([
      rows.map((row) => Number(row[1]) * 0.107),
      rows.map((row) => Number(row[2]) * 0.107),
    ]);
  });
});

/** Measured data beside the project; they are not part of it (DEVELOPERS.md, "Measured data"). */
const REAL = path.resolve(import.meta.dirname, '../../../../shared/real');
const present = existsSync(REAL);
if (!present) console.info('skipped: there are no measured files at ../shared/real beside the project');

describe.skipIf(!present)('measured files (needed: ../shared/real)', () => {
  const load = (name: string) => new Uint8Array(readFileSync(path.join(REAL, name)));

  // Counts of the table that comes with the files.
  test('Perrin 1909: three tracks of 49, 31 and 41 points, 30 s apart', () => {
    const { summary, trajectories } = read(load('perrin1909_mastic_tracks.csv'));
    const lengths = trajectories.trackIds.map(
      (_, id) => trajectories.track.filter((track) => track === id).length,
    );
    expect(lengths).toEqual([49, 31, 41]);
    expect(summary).toMatchObject({ rows: 121, frameInterval: 30, gaps: 0, badRows: 0 });
  });

  test('Perrin 1913: 508 tracks of two points, root-mean-square displacement 8.126 µm', () => {
    const outcome = read(load('perrin1913_displacements_508.csv'));
    expect(outcome.summary).toMatchObject({
      rows: 1016,
      tracks: 508,
      longestTrackFrames: 2,
      frameInterval: 30,
    });
    const squares = values(outcome).axes.map((axis) => axis.reduce((sum, value) => sum + value * value, 0));
    expect(Math.sqrt((squares[0]! + squares[1]!) / 508)).toBeCloseTo(8.126, 3);
  });

  test('spheres in a flow: 11 tracks of 2,305 points in pixels, 41.8936 ms apart', () => {
    const bytes = load('flow_polystyrene_fiducials.csv');
    const { summary } = read(bytes, { pixelSize: '0.43164' });
    expect(summary).toMatchObject({
      rows: 25_355,
      tracks: 11,
      longestTrackFrames: 2305,
      shortestTrackFrames: 2305,
    });
    expect(summary.frameInterval).toBeCloseTo(0.0418936, 7);
    expect(summary.badRows).toBe(0);
  });
});
