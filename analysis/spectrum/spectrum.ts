import type { Segment } from '../input/segments';
import { driftSpectrum, sineTransform } from './sine-transform';

/** Sums over all series of one length N; arrays have N elements, one a coefficient k. */
export interface SpectrumGroup {
  readonly length: number;
  /** Number of segments M; with d axes there are M·d series. */
  readonly segments: number;
  /** S_k = Σ û_k² over segments and axes, µm². */
  readonly power: Float64Array;
  /** Σ û_k⁴, µm⁴. */
  readonly fourth: Float64Array;
  /** U_k = Σ_m û_mk, one array an axis, µm. */
  readonly sums: readonly Float64Array[];
}

/** Everything that the likelihoods need to know of the data: their cost no longer depends on the number of tracks. */
export interface Spectrum {
  readonly dims: number;
  readonly groups: readonly SpectrumGroup[];
  /** Σ_k n_k: number of coefficients, that is of axis-displacements. */
  readonly coefficients: number;
  /** Number of displacement vectors. */
  readonly displacements: number;
}

/** Sine transforms of all segments, added up by length, shortest first. */
export function spectrumOf(segments: readonly Segment[], dims: number): Spectrum {
  const byLength = new Map<number, Segment[]>();
  for (const segment of segments) {
    const length = segment.displacements[0]!.length;
    const same = byLength.get(length);
    if (same) same.push(segment);
    else byLength.set(length, [segment]);
  }
  const groups = [...byLength.entries()]
    .sort(([a], [b]) => a - b)
    .map(([length, own]) => groupOf(length, own, dims));
  const displacements = groups.reduce((total, group) => total + group.segments * group.length, 0);
  return { dims, groups, displacements, coefficients: displacements * dims };
}

function groupOf(length: number, segments: readonly Segment[], dims: number): SpectrumGroup {
  const power = new Float64Array(length);
  const fourth = new Float64Array(length);
  const sums = Array.from({ length: dims }, () => new Float64Array(length));
  for (const segment of segments) {
    for (let axis = 0; axis < dims; axis++) {
      const transformed = sineTransform(segment.displacements[axis]!);
      const own = sums[axis]!;
      for (let k = 0; k < length; k++) {
        const u = transformed[k]!;
        power[k]! += u * u;
        fourth[k]! += u ** 4;
        own[k]! += u;
      }
    }
  }
  return { length, segments: segments.length, power, fourth, sums };
}

/** The spectrum after a common displacement per frame (µm, one an axis) was taken off every series. */
export function withoutDrift(spectrum: Spectrum, step: readonly number[]): Spectrum {
  const groups = spectrum.groups.map((group) => {
    const g = driftSpectrum(group.length);
    const power = group.power.slice();
    for (let axis = 0; axis < spectrum.dims; axis++) {
      const v = step[axis]!;
      for (let k = 0; k < group.length; k++) {
        power[k]! += -2 * v * g[k]! * group.sums[axis]![k]! + group.segments * (g[k]! * v) ** 2;
      }
    }
    // Rounding may leave −1e−20 where the drift was all there is.
    for (let k = 0; k < group.length; k++) power[k] = Math.max(power[k]!, 0);
    return { ...group, power };
  });
  return { ...spectrum, groups };
}
