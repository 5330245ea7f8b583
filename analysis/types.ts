/**
 * The public shapes of the analysis: what goes into `analyse` and what comes out.
 *
 * Everything here is plain data (numbers, strings, typed arrays), so that a value can cross a worker boundary,
 * be written as JSON (results only) and be computed in a server, a browser or a script with the same outcome.
 * Lengths are micrometres, times seconds, diffusion coefficients square micrometres per second,
 * temperatures degrees Celsius, unless a name says otherwise.
 */

/** Positions read from one file, ready for analysis. The columns are parallel: element i of each is row i. */
export interface Trajectories {
  /** Address of the reading these positions come from (64 hexadecimal digits). */
  readonly hash: string;
  /** Distinct track ids as text, in order of first appearance: "007" and "7" are two tracks. */
  readonly trackIds: readonly string[];
  /** Index into `trackIds` for every row. */
  readonly track: Int32Array;
  /** Frame number of every row, or null when the file has times instead. */
  readonly frame: Int32Array | null;
  /** Time of every row in seconds, or null when the file has frames instead. */
  readonly time: Float64Array | null;
  /** One to three columns of positions in micrometres: x, y, z in that order. NaN marks an unreadable coordinate. */
  readonly axes: readonly Float64Array[];
  /** Frame interval in seconds: stated, or null when it follows from `time`. */
  readonly frameInterval: number | null;
  /** Pixel of the camera in the sample, micrometres, where positions were measured in pixels. */
  readonly pixelSize?: number | null;
  /** Exposure of one frame, or null when not stated (then taken as 0, with a warning). */
  readonly exposure: Exposure | null;
}

/** Exposure of one frame, in seconds or as a fraction (0 to 1) of the frame interval. */
export type Exposure = { readonly seconds: number } | { readonly fraction: number };

/** What a person may set on a diffusion block. Every field is optional in meaning: null or "auto" leaves it to the data. */
export interface AnalysisSettings {
  /** Number of axes used, from x on. "auto": all measured axes (an axis that never changes is not one). */
  readonly dims: 'auto' | 1 | 2 | 3;
  /** First and last lag, in frames, of the line fit shown beside the likelihood estimate; null: the optimal range. */
  readonly fitLagFirst: number | null;
  readonly fitLagLast: number | null;
  /** "auto": a common drift is removed only when it is significant; "remove" always; "keep" never. */
  readonly drift: 'auto' | 'remove' | 'keep';
  /** Tracks with fewer frames than this are left out (and counted). At least 2. */
  readonly minTrackFrames: number;
  /** Replaces the exposure of the readings; null: as read. */
  readonly exposure: Exposure | null;
  /** Localisation error per axis known from elsewhere, micrometres; null: fitted from the data. */
  readonly sigma: number | null;
  /** Medium by name, or its viscosity in millipascal seconds; null: not stated. */
  readonly medium: Medium | null;
  /** Temperature, degrees Celsius. */
  readonly temperature: number | null;
  /** Hydrodynamic particle diameter, micrometres. */
  readonly particleDiameter: number | null;
  /** Shape in which the size of a confinement is stated. */
  readonly geometry: 'box' | 'circle' | 'sphere';
  /** Tracks left out by hand. Reading is the index of the reading in the list given to `analyse`. */
  readonly excludedTracks: readonly ExcludedTrack[];
}

export type Medium = { readonly name: 'water' } | { readonly viscosity: number };

export interface ExcludedTrack {
  readonly reading: number;
  readonly track: string;
  readonly reason: string;
}

export type Verdict = 'free' | 'directed' | 'confined' | 'anomalous' | 'undecided';

/** An estimate with its 95 % interval. An open end is null. */
export interface Estimate {
  readonly value: number;
  readonly lo: number | null;
  readonly hi: number | null;
}

/** A sentence for people with a stable code for programs. `level`: "look" asks for a look, "problem" forbids trust. */
export interface Warning {
  readonly code: string;
  readonly level: 'look' | 'problem';
  readonly message: string;
}

/** A question asked of every data set, with its answer in a sentence. */
export interface Check {
  readonly code: string;
  readonly level: 'fine' | 'look' | 'problem';
  /** Probability of a worse value by chance; null where no such number belongs to it. */
  readonly p: number | null;
  readonly message: string;
}

/** How many of something were left out before any statistics, and why. */
export interface Exclusion {
  readonly reason: string;
  readonly what: 'rows' | 'tracks' | 'axes' | 'displacements';
  readonly count: number;
}

/** Mean squared displacement against lag, ensemble over all tracks; arrays are parallel, one element a lag. */
export interface MsdCurve {
  /** Lag in frames (1, 2, 3 …); lags without a pair are not listed. */
  readonly lag: readonly number[];
  readonly lagSeconds: readonly number[];
  /** Sum over axes, square micrometres. */
  readonly total: readonly number[];
  /** One array for each axis, square micrometres. */
  readonly perAxis: readonly (readonly number[])[];
  /** Number of position pairs with exactly this lag. */
  readonly pairs: readonly number[];
  /** Standard error of `total`, square micrometres, from the exact covariance under the fitted free model. */
  readonly se: readonly number[];
  /** Value of the fitted model at each lag, square micrometres, with the 95 % band that D's interval gives. */
  readonly model: readonly number[];
  readonly modelLo: readonly number[];
  readonly modelHi: readonly number[];
}

/** Straight line through the first points of the MSD curve: shown for comparison, never the record's D. */
export interface LineFit {
  readonly lagFirst: number;
  readonly lagLast: number;
  /** Slope divided by 2·dims, square micrometres per second. */
  readonly D: number;
  /** Square micrometres; may be negative. */
  readonly intercept: number;
}

/** Common velocity of all tracks. Arrays have one element an axis. */
export interface Drift {
  readonly velocity: readonly number[];
  /** Standard error per axis, micrometres per second. */
  readonly se: readonly number[];
  /** Length of the velocity vector, micrometres per second. */
  readonly speed: number;
  /** Corrected likelihood-ratio statistic and the threshold it is held against. */
  readonly statistic: number;
  readonly threshold: number;
  readonly significant: boolean;
  /** Whether it was removed before D was fitted. */
  readonly removed: boolean;
}

/**
 * Size of a confinement. All follow from the standard deviation of the positions per axis, so that each shape can be
 * stated from one fit: a box (a square, a cube) is √12 of it wide, a circle has a radius of 2, a sphere of √5 of it.
 */
export interface Confinement {
  /** What the positions say of the boundary: flat walls, a harmonic well, or too little to tell. */
  readonly boundary: 'walls' | 'well' | 'unclear';
  /** Excess kurtosis of the positions per axis about the middle of their track: −1.2 for walls, 0 for a well; or null. */
  readonly kurtosis: number | null;
  /** Box-equivalent width, µm. */
  readonly width: Estimate;
  readonly circleRadius: Estimate;
  readonly sphereRadius: Estimate;
  /** 1/κ: after a few of these the particle has forgotten where it was; seconds. */
  readonly relaxationTime: Estimate;
}

/** A model that was held against free diffusion, and how well it did. */
export interface ModelFit {
  readonly name: 'drift' | 'anomalous' | 'confined' | 'individual';
  /** −2 ln likelihood ratio against free diffusion, divided by the dispersion; 0 when it is no better. */
  readonly statistic: number;
  /** µm²/s of this model; null where it has none. */
  readonly D: number | null;
  /** α; relaxation time (s); speed (µm/s), by the model's name. */
  readonly parameter: number;
}

/** Motion that all tracks share from frame to frame, as a stage gives. */
export interface SharedMotion {
  /** Of the stage's random walk, µm²/s; its steady drift is under `drift`. */
  readonly D: number;
  /** In standard errors; above 3.3 it is taken to be there. */
  readonly z: number;
  readonly removed: boolean;
}

/** Size from D, or viscosity from D, or expected D; each null unless its inputs were given. */
export interface StokesEinstein {
  /** Viscosity of the medium at the temperature, millipascal seconds. */
  readonly viscosity: number | null;
  /** Apparent hydrodynamic diameter, micrometres. */
  readonly diameter: Estimate | null;
  /** Viscosity from D and the particle's diameter, millipascal seconds. */
  readonly apparentViscosity: Estimate | null;
  /** D expected from viscosity and diameter, square micrometres per second. */
  readonly expectedD: number | null;
}

/** The outcome of one analysis. Numbers are finite or null, never NaN, so that JSON keeps them. */
export interface AnalysisResult {
  /** Name and version of the engine, e.g. "motebook-engine/1". A changed number needs a changed version. */
  readonly engine: string;
  readonly readingHashes: readonly string[];
  readonly settings: AnalysisSettings;
  /** The diffusion coefficient; null when no motion is resolved or the verdict is anomalous. */
  readonly D: Estimate | null;
  /** Variance of the localisation error per axis, square micrometres; may be negative. */
  readonly sigmaSquared: { readonly value: number; readonly se: number | null } | null;
  /** √σ², micrometres; null when σ² ≤ 0. */
  readonly sigma: number | null;
  readonly verdict: Verdict;
  /** One plain sentence that says what the verdict means here. */
  readonly sentence: string;
  readonly drift: Drift | null;
  /** Anomalous exponent of the best such model, whatever the verdict; null when no motion is resolved. */
  readonly alpha: Estimate | null;
  /** MSD = 2·dims·K·t^α: K in µm²/s^α; null unless anomalous. */
  readonly K: Estimate | null;
  /** Box-equivalent width of a confinement, micrometres; null unless confined. */
  readonly L: Estimate | null;
  readonly confinement: Confinement | null;
  /** Confinement in a box narrower than this is excluded, µm; null when nothing can be excluded. */
  readonly excludedWidth: number | null;
  /** Root-mean-square speed, µm/s, of tracks that run in directions of their own; null unless that is the verdict. */
  readonly individualSpeed: Estimate | null;
  /** What free diffusion was held against, best first. */
  readonly models: readonly ModelFit[];
  /** By how much displacements scatter more than one D explains, 1 when not; statistics are divided by it. */
  readonly dispersion: number;
  readonly sharedMotion: SharedMotion | null;
  /** Tracks were cut where a displacement was too long for one particle. */
  readonly mislinks: number;
  /** Gaps that were bridged for the verdict only. */
  readonly gapsFilled: number;
  readonly dims: number;
  readonly frameInterval: number | null;
  /** Exposure as a fraction of the frame interval that was used, and whether anybody stated it. */
  readonly exposureFraction: number;
  readonly exposureStated: boolean;
  /** Tracks, frames (positions) and displacements that entered D. */
  readonly tracks: number;
  readonly frames: number;
  readonly displacements: number;
  /** Runs of consecutive frames. */
  readonly segments: number;
  readonly gaps: number;
  readonly msd: MsdCurve | null;
  readonly lineFit: LineFit | null;
  readonly stokesEinstein: StokesEinstein | null;
  readonly warnings: readonly Warning[];
  readonly checks: readonly Check[];
  readonly exclusions: readonly Exclusion[];
}

/** The positions cannot be analysed at all. `code` is stable, `message` says what and what to do. */
export interface AnalysisFailure {
  readonly failed: true;
  readonly engine: string;
  readonly code: string;
  readonly message: string;
}
