import { minimise, minimiseOnGrid } from '../fit/minimise';
import type { Spectrum } from '../spectrum/spectrum';
import { noiseSpectrum } from '../spectrum/sine-transform';

/** Shape of a model's spectrum for each group of a Spectrum: variance of û_k for D·Δt = 1 and no localisation error. */
export type Shape = readonly Float64Array[];

/** The shape b_k that localisation error adds, for each group. */
export function noiseShape(spectrum: Spectrum): Shape {
  return spectrum.groups.map((group) => noiseSpectrum(group.length));
}

/**
 * −2 ln L = Σ_k n_k ln λ_k + S_k/λ_k with λ_k = δ a_k + s b_k (2π constant omitted).
 * @param delta - D·Δt, µm².   @param s - σ², µm²; may be negative as long as every λ_k stays positive.
 * @returns Infinity where some λ_k is not positive.
 */
export function minus2LogLikelihood(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  delta: number,
  s: number,
): number {
  let total = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    const n = group.segments * spectrum.dims;
    const ga = a[at]!;
    const gb = b[at]!;
    for (let k = 0; k < group.length; k++) {
      const lambda = delta * ga[k]! + s * gb[k]!;
      if (!(lambda > 0)) return Infinity;
      total += n * Math.log(lambda) + group.power[k]! / lambda;
    }
  }
  return total;
}

export interface TwoParameterFit {
  /** D·Δt, µm²; 0 when the best fit has no motion. */
  readonly delta: number;
  /** σ², µm². */
  readonly s: number;
  readonly minus2LogL: number;
}

/** Reduced localisation errors s/δ that are tried, above the smallest possible one. */
const RATIO_GRID = Array.from({ length: 45 }, (_, i) => 1e-3 * 2e6 ** (i / 44));

/**
 * Best δ and s for λ = δa + sb. For a fixed ratio s/δ the best δ is a mean, so the search is over the ratio alone; the
 * pure-noise edge δ = 0 is compared too, so that few data never give a negative D or a failed fit.
 * @param hint - ratio of an earlier, similar fit: searched around first, to save time.
 */
export function fitTwo(spectrum: Spectrum, a: Shape, b: Shape, hint?: number): TwoParameterFit {
  const least = leastRatio(a, b);
  const profile = (w: number) => profileAtRatio(spectrum, a, b, least + w);
  let best: { w: number; value: number } | null = null;
  if (hint !== undefined && hint > least) {
    const around = Math.log(hint - least);
    const found = minimise((x) => profile(Math.exp(x)).value, around - 2, around + 2, { guess: around });
    if (Math.abs(found.x - around) < 1.9) best = { w: Math.exp(found.x), value: found.value };
  }
  if (!best) {
    let at = 0;
    const values = RATIO_GRID.map((w) => profile(w).value);
    for (let i = 1; i < values.length; i++) if (values[i]! < values[at]!) at = i;
    const left = Math.log(RATIO_GRID[Math.max(0, at - 1)]!) - (at === 0 ? 5 : 0);
    const right = Math.log(RATIO_GRID[Math.min(RATIO_GRID.length - 1, at + 1)]!);
    const found = minimise((x) => profile(Math.exp(x)).value, left, right, {
      guess: Math.log(RATIO_GRID[at]!),
    });
    best = { w: Math.exp(found.x), value: found.value };
  }
  const { delta, value } = profile(best.w);
  const still = fitOne(spectrum, b);
  if (still.minus2LogL <= value) return { delta: 0, s: still.scale, minus2LogL: still.minus2LogL };
  return polished(spectrum, a, b, { delta, s: delta * (least + best.w), minus2LogL: value });
}

/**
 * Fisher scoring to the last digits: a search by function values alone knows its minimum only to the square root of the
 * machine's precision, and results are to be the same in every program.
 */
function polished(spectrum: Spectrum, a: Shape, b: Shape, start: TwoParameterFit): TwoParameterFit {
  let fit = start;
  for (let turn = 0; turn < 8; turn++) {
    const { delta: scoreDelta, s: scoreS, aa, ab, bb } = scores(spectrum, a, b, fit);
    const determinant = aa * bb - ab * ab;
    if (!(determinant > 1e-10 * aa * bb)) return fit;
    const stepDelta = (bb * scoreDelta - ab * scoreS) / determinant;
    const stepS = (aa * scoreS - ab * scoreDelta) / determinant;
    const next = { delta: fit.delta + stepDelta, s: fit.s + stepS };
    if (!(next.delta > 0)) return fit;
    const minus2LogL = minus2LogLikelihood(spectrum, a, b, next.delta, next.s);
    // Equal within rounding is accepted: there only the slope still tells which way the optimum lies.
    if (!(minus2LogL <= fit.minus2LogL + 1e-9 * Math.max(1, Math.abs(fit.minus2LogL)) * 1e-3)) return fit;
    fit = { ...next, minus2LogL };
    if (Math.abs(stepDelta) <= 1e-13 * fit.delta && Math.abs(stepS) <= 1e-13 * fit.delta) break;
  }
  return fit;
}

/** Slope of ln L and Fisher information at a point. */
function scores(spectrum: Spectrum, a: Shape, b: Shape, fit: { delta: number; s: number }) {
  let delta = 0;
  let s = 0;
  let aa = 0;
  let ab = 0;
  let bb = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    const n = group.segments * spectrum.dims;
    for (let k = 0; k < group.length; k++) {
      const lambda = fit.delta * a[at]![k]! + fit.s * b[at]![k]!;
      const slope = (0.5 * (group.power[k]! / lambda - n)) / lambda;
      delta += slope * a[at]![k]!;
      s += slope * b[at]![k]!;
      const da = a[at]![k]! / lambda;
      const db = b[at]![k]! / lambda;
      aa += 0.5 * n * da * da;
      ab += 0.5 * n * da * db;
      bb += 0.5 * n * db * db;
    }
  }
  return { delta, s, aa, ab, bb };
}

/** The most negative ratio s/δ at which every λ_k is still positive. */
function leastRatio(a: Shape, b: Shape): number {
  let least = -Infinity;
  for (const [at, group] of a.entries()) {
    for (let k = 0; k < group.length; k++) least = Math.max(least, -group[k]! / b[at]![k]!);
  }
  return least;
}

function profileAtRatio(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  ratio: number,
): { delta: number; value: number } {
  let logs = 0;
  let weighted = 0;
  for (const [at, group] of spectrum.groups.entries()) {
    const n = group.segments * spectrum.dims;
    const ga = a[at]!;
    const gb = b[at]!;
    for (let k = 0; k < group.length; k++) {
      const shape = ga[k]! + ratio * gb[k]!;
      if (!(shape > 0)) return { delta: 0, value: Infinity };
      logs += n * Math.log(shape);
      weighted += group.power[k]! / shape;
    }
  }
  const delta = weighted / spectrum.coefficients;
  if (!(delta > 0)) return { delta: 0, value: -Infinity };
  return { delta, value: logs + spectrum.coefficients * (Math.log(delta) + 1) };
}

/** Best scale of a single shape: λ = scale·a. */
export function fitOne(spectrum: Spectrum, a: Shape): { scale: number; minus2LogL: number } {
  const { delta, value } = profileAtRatio(spectrum, a, a, 0);
  return { scale: delta, minus2LogL: value };
}

/** Best δ for a known s, λ = δa + sb; δ = 0 is allowed. */
export function fitDelta(spectrum: Spectrum, a: Shape, b: Shape, s: number): TwoParameterFit {
  if (s === 0) {
    const { scale, minus2LogL } = fitOne(spectrum, a);
    return { delta: scale, s, minus2LogL };
  }
  const f = (x: number) => minus2LogLikelihood(spectrum, a, b, Math.exp(x), s);
  const start = Math.log(Math.max(fitOne(spectrum, a).scale, 1e-300));
  // From far below the error to above anything the data allow.
  const found = minimise(f, start - 30, start + 3, { guess: start - 0.5 });
  const still = minus2LogLikelihood(spectrum, a, b, 0, s);
  if (still <= found.value) return { delta: 0, s, minus2LogL: still };
  return { delta: Math.exp(found.x), s, minus2LogL: found.value };
}

/** With this many coefficients the likelihood has one dip, so a search around a nearby answer is enough. */
const ONE_DIP_FROM = 400;

/** Best s for a known δ, λ = δa + sb. @param guess - a nearby answer; few data are searched as a whole. */
export function fitNoise(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  delta: number,
  guess: number,
): TwoParameterFit {
  const least = delta * leastRatio(a, b);
  const f = (x: number) => minus2LogLikelihood(spectrum, a, b, delta, least + Math.exp(x));
  if (spectrum.coefficients < ONE_DIP_FROM) {
    // Where all spread is noise, s is about the mean power, whatever δ is; beyond that there is nothing to find.
    const last = Math.log(Math.max(fitOne(spectrum, b).scale, 30 * delta)) + 1;
    const grid = RATIO_GRID.map((w) => Math.log(delta * w)).filter((x) => x < last);
    const found = minimiseOnGrid(f, [...grid, last]);
    return { delta, s: least + Math.exp(found.x), minus2LogL: found.value };
  }
  const around = Math.log(Math.max(guess - least, delta * 1e-6));
  let found = minimise(f, around - 3, around + 3, { guess: around });
  if (Math.abs(found.x - around) > 2.9) found = minimise(f, around - 25, around + 25, { guess: found.x });
  return { delta, s: least + Math.exp(found.x), minus2LogL: found.value };
}

/** Standard errors of δ and s from the Fisher information ½ Σ n (∂λ)(∂λ)ᵀ/λ². @returns null where it cannot be inverted. */
export function standardErrors(
  spectrum: Spectrum,
  a: Shape,
  b: Shape,
  fit: TwoParameterFit,
): { delta: number; s: number } | null {
  const { aa, ab, bb } = scores(spectrum, a, b, fit);
  const determinant = aa * bb - ab * ab;
  // When all series have one displacement, a and b are proportional and the two cannot be told apart.
  if (!(determinant > 1e-10 * aa * bb)) return null;
  return { delta: Math.sqrt(bb / determinant), s: Math.sqrt(aa / determinant) };
}
