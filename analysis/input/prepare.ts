import type { AnalysisSettings, Exclusion, Trajectories, Warning } from '../types';
import { frameTiming, isRegular, type FrameTiming } from './frame-interval';
import { collectRows, type RawTrack } from './collect-rows';

/** One particle's positions, sorted, without doubles, relative to its first position. */
export interface Track {
  readonly reading: number;
  readonly id: string;
  /** Frame of the first position in the reading's own count. */
  readonly start: number;
  /** Frames of the positions, relative to `start`, strictly ascending. */
  readonly frames: Int32Array;
  /** First position as measured, micrometres, one an axis. */
  readonly origin: readonly number[];
  /** Positions relative to the first one, micrometres; one array an axis. */
  readonly axes: readonly Float64Array[];
}

export interface Prepared {
  readonly tracks: readonly Track[];
  readonly dims: number;
  /** Seconds. */
  readonly interval: number;
  readonly exclusions: readonly Exclusion[];
  readonly warnings: readonly Warning[];
}

export interface PrepareFailure {
  readonly code: string;
  readonly message: string;
}

/** Readings of one block may differ in their frame interval by this much and still be one ensemble. */
const INTERVAL_TOLERANCE = 1e-3;

/** A femtosecond and thirty thousand years: no camera is outside, and inside all numbers stay numbers. Seconds. */
const SHORTEST_INTERVAL = 1e-15;
const LONGEST_INTERVAL = 1e12;

/**
 * Turns readings into tracks fit for analysis and counts everything that is left out, with the reason.
 * Never averages silently: two different positions of one particle in one frame are both dropped.
 */
export function prepare(
  readings: readonly Trajectories[],
  settings: AnalysisSettings,
): Prepared | PrepareFailure {
  const exclusions = new Map<string, Exclusion>();
  const warnings: Warning[] = [];
  const exclude = (what: Exclusion['what'], reason: string, count: number) => {
    if (count === 0) return;
    const before = exclusions.get(reason);
    exclusions.set(reason, { what, reason, count: (before?.count ?? 0) + count });
  };

  const raw: RawTrack[] = [];
  const timings: FrameTiming[] = [];
  for (const [index, reading] of readings.entries()) {
    const collected = collectRows(reading, index);
    exclude('rows', 'position not readable', collected.unreadable);
    exclude('rows', 'time or frame not readable', collected.untimed);
    const timing = timingOf(reading, collected.tracks);
    if ('code' in timing) return timing;
    timings.push(timing);
    const framed = collected.tracks.map((track) => withFrames(track, reading.time ? timing.interval : null));
    raw.push(...framed.map((found) => found.track));
    exclude('rows', 'same row twice', sum(framed.map((found) => found.duplicates)));
    exclude('rows', 'two positions in one frame', sum(framed.map((found) => found.conflicts)));
  }

  const interval = timings[0]?.interval;
  if (interval === undefined)
    return { code: 'no-readings', message: 'There is no reading to analyse. Add a trajectory file.' };
  const other = timings.find((timing) => Math.abs(timing.interval / interval - 1) > INTERVAL_TOLERANCE);
  if (other) {
    return {
      code: 'intervals-differ',
      message: `The readings have different frame intervals (${interval} s and ${other.interval} s). Analyse them in separate blocks.`,
    };
  }
  addTimingWarning(timings, warnings);
  addRowWarnings(exclusions, warnings);

  const left = leaveOutByHand(raw, settings, exclude);
  const measured = measuredAxes(left, Math.max(...readings.map((reading) => reading.axes.length)));
  if (measured.constant > 0) {
    exclude('axes', 'axis that never changes', measured.constant);
    warnings.push({
      code: 'axis-constant',
      level: 'look',
      message:
        'An axis never changes and was not counted as measured. If it was measured, check the columns of the reading.',
    });
  }
  let axes = measured.axes;
  if (settings.dims !== 'auto') {
    if (settings.dims > axes.length) {
      warnings.push({
        code: 'dims-reduced',
        level: 'look',
        message: `The settings ask for ${settings.dims} axes, but the file has ${axes.length} that change; these were used.`,
      });
    }
    axes = axes.slice(0, settings.dims);
  }

  const shortest = Math.max(2, settings.minTrackFrames);
  const tracks: Track[] = [];
  let short = 0;
  for (const track of left) {
    if (track.frames.length < shortest || axes.length === 0) short += 1;
    else tracks.push(finish(track, axes));
  }
  if (axes.length > 0)
    exclude('tracks', shortest === 2 ? 'a single position' : `fewer than ${shortest} frames`, short);
  return { tracks, dims: axes.length, interval, exclusions: [...exclusions.values()], warnings };
}

function timingOf(reading: Trajectories, tracks: readonly RawTrack[]): FrameTiming | PrepareFailure {
  if (reading.time === null) {
    if (reading.frameInterval !== null && reading.frameInterval > 0) {
      return { interval: reading.frameInterval, worst: 0, rms: 0 };
    }
    return {
      code: 'needs-frame-interval',
      message: 'The file counts frames. State the frame interval in seconds.',
    };
  }
  const timing = frameTiming(
    tracks.map((track) => track.times),
    reading.frameInterval,
  );
  if (timing === null || !(timing.interval > 0) || !Number.isFinite(timing.interval)) {
    return {
      code: 'no-displacements',
      message: 'No track has two positions at different times, so nothing can be said about motion.',
    };
  }
  if (timing.interval < SHORTEST_INTERVAL || timing.interval > LONGEST_INTERVAL) {
    return {
      code: 'interval-impossible',
      message: `The times lie ${timing.interval} s apart, which cannot be a frame interval. Check the time column and its unit.`,
    };
  }
  if (timing.rms > 0.1) {
    return {
      code: 'irregular-intervals',
      message: `The times do not follow a regular frame interval (they scatter by ${(timing.rms * 100).toFixed(0)} % of it). These methods need regular frames; export the tracks with frame numbers, or leave out the irregular part.`,
    };
  }
  return timing;
}

function addTimingWarning(timings: readonly FrameTiming[], warnings: Warning[]): void {
  if (timings.every(isRegular)) return;
  const worst = Math.max(...timings.map((timing) => timing.worst));
  warnings.push({
    code: 'irregular-intervals',
    level: 'look',
    message: `Times deviate from regular frames by up to ${(worst * 100).toFixed(0)} % of the frame interval. D assumes regular frames; check the camera's time stamps.`,
  });
}

function addRowWarnings(exclusions: ReadonlyMap<string, Exclusion>, warnings: Warning[]): void {
  const rows = (reason: string) => exclusions.get(reason)?.count ?? 0;
  const say = (code: string, level: Warning['level'], count: number, message: string) => {
    if (count > 0) warnings.push({ code, level, message });
  };
  const unreadable = rows('position not readable') + rows('time or frame not readable');
  say(
    'unreadable-positions',
    'look',
    unreadable,
    `${count(unreadable, 'row')} could not be used (no readable position or time). Each leaves a gap in its track.`,
  );
  const doubles = rows('same row twice');
  say(
    'duplicates',
    'look',
    doubles,
    `${count(doubles, 'row')} stood in the file twice; one of each was kept.`,
  );
  const conflicts = rows('two positions in one frame');
  say(
    'conflicts',
    'problem',
    conflicts,
    `${count(conflicts, 'row')} gave one particle two positions in one frame; they were dropped. Check how tracks were numbered.`,
  );
}

const count = (n: number, what: string) => `${n} ${what}${n === 1 ? '' : 's'}`;
const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);

/** Sorts out one track: frames relative to the first, doubles and conflicts gone. */
function withFrames(track: RawTrack, interval: number | null) {
  const first = track.times[0] ?? 0;
  const frameOf = (i: number) =>
    Math.round(interval === null ? track.times[i]! - first : (track.times[i]! - first) / interval);
  const keep: number[] = [];
  let duplicates = 0;
  let conflicts = 0;
  for (let i = 0; i < track.times.length;) {
    const frame = frameOf(i);
    let end = i + 1;
    while (end < track.times.length && frameOf(end) === frame) end += 1;
    let same = true;
    for (let j = i + 1; j < end; j++)
      same &&= track.axes.every((axis) => Object.is(axis[j], axis[i]) || axis[j] === axis[i]);
    if (same) {
      keep.push(i);
      duplicates += end - i - 1;
    } else {
      conflicts += end - i;
    }
    i = end;
  }
  const origin = keep.length > 0 ? frameOf(keep[0]!) : 0;
  return {
    duplicates,
    conflicts,
    track: {
      ...track,
      start: Math.round(interval === null ? first : first / interval) + origin,
      frames: Int32Array.from(keep, (i) => frameOf(i) - origin),
      times: Float64Array.from(keep, (i) => track.times[i]!),
      axes: track.axes.map((axis) => Float64Array.from(keep, (i) => axis[i]!)),
    },
  };
}

function leaveOutByHand(
  tracks: readonly RawTrack[],
  settings: AnalysisSettings,
  exclude: (what: 'tracks', reason: string, count: number) => void,
): readonly RawTrack[] {
  const key = (reading: number, id: string) => `${reading}\n${id}`;
  const out = new Set(settings.excludedTracks.map((one) => key(one.reading, one.track)));
  if (out.size === 0) return tracks;
  const left = tracks.filter((track) => !out.has(key(track.reading, track.id)));
  exclude('tracks', 'left out by hand', tracks.length - left.length);
  return left;
}

/** Indices of the axes that change in some track; one that never does was not measured. */
function measuredAxes(tracks: readonly RawTrack[], available: number): { axes: number[]; constant: number } {
  const axes: number[] = [];
  for (let axis = 0; axis < available; axis++) {
    if (tracks.some((track) => track.axes[axis]?.some((value) => value !== track.axes[axis]![0])))
      axes.push(axis);
  }
  // When nothing moves at all, no axis is better than another: all count, and D will not be resolved.
  const moving = axes.length > 0 || tracks.every((track) => track.frames.length < 2);
  if (!moving) return { axes: Array.from({ length: available }, (_, axis) => axis), constant: 0 };
  return { axes, constant: axes.length > 0 ? available - axes.length : 0 };
}

/** A large offset would cost digits in every later sum, so each track starts at zero. */
function finish(track: RawTrack, axes: readonly number[]): Track {
  return {
    reading: track.reading,
    id: track.id,
    start: track.start,
    frames: track.frames,
    origin: axes.map((axis) => track.axes[axis]?.[0] ?? 0),
    axes: axes.map((axis) => {
      const column = track.axes[axis] ?? new Float64Array(track.frames.length);
      const first = column[0]!;
      return column.map((value) => value - first);
    }),
  };
}
