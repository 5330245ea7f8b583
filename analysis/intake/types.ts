/** The shapes of intake: what was understood of a file, and the exact reading of it that a person confirmed. */

/** How the bytes are cut into cells. Part of a reading, so that it can be repeated years later. */
export interface Dialect {
  readonly encoding: 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252';
  readonly delimiter: ',' | ';' | '\t' | '|' | ' ';
  readonly decimal: '.' | ',';
  /** Line that starts with this is a comment; null: there are none. */
  readonly comment: string | null;
  /** Line numbers, from 1 as an editor shows them; null where the file has no such line. */
  readonly headerLine: number | null;
  readonly unitsLine: number | null;
  readonly firstDataLine: number;
}

export type TimeUnit = 's' | 'ms' | 'us' | 'min' | 'h';
export type LengthUnit = 'um' | 'nm' | 'mm' | 'm' | 'px';

/** Index (from 0) of the column that plays each part; null: the file has none. Exactly one of time and frame is used. */
export interface ColumnRoles {
  readonly track: number | null;
  readonly time: number | null;
  readonly frame: number | null;
  readonly x: number;
  readonly y: number | null;
  readonly z: number | null;
}

/**
 * Everything that turns a file's bytes into positions: the immutable "reading". Measured values are decimal strings,
 * so that the canonical JSON (and with it the reading's hash) never depends on how a program prints a float.
 */
export interface ReadingSpec {
  readonly parser: string;
  readonly dialect: Dialect;
  readonly columns: ColumnRoles;
  readonly units: {
    readonly time: TimeUnit | null;
    readonly x: LengthUnit;
    readonly y: LengthUnit | null;
    readonly z: LengthUnit | null;
  };
  /** Seconds between frames; required with a frame column, optional beside a time column (must agree with it). */
  readonly frameInterval: string | null;
  /** Micrometres per pixel; required when a unit is px. */
  readonly pixelSize: string | null;
  /** Exposure of a frame; null: not stated. */
  readonly exposure: { readonly seconds: string } | { readonly fraction: string } | null;
}

/** A row (or cell) that could not be used, with its place in the file. Nothing is dropped without one of these. */
export interface RowProblem {
  /** Line number, from 1. */
  readonly line: number;
  readonly reason: string;
  /** The line's text, cut at 200 characters. */
  readonly text: string;
}

/** A file that cannot be read as trajectories: what it seems to be, and what to do. `line` where it is known. */
export interface IntakeFailure {
  readonly failed: true;
  readonly code:
    | 'empty'
    | 'binary'
    | 'encoding'
    | 'too-big'
    | 'too-wide'
    | 'line-too-long'
    | 'no-columns'
    | 'no-positions'
    | 'no-rows'
    | 'needs-frame-interval'
    | 'needs-pixel-size'
    | 'frame-interval-contradicts'
    | 'bad-spec';
  readonly message: string;
  readonly line: number | null;
}

/** What can be asked for when the file does not say it. */
export type Missing = 'frameInterval' | 'pixelSize' | 'lengthUnit' | 'timeUnit' | 'exposure';

/** What was understood of a file before anyone confirms it. */
export interface Inspection {
  readonly failed: false;
  /** The reading as guessed; complete except for what `missing` lists as required. */
  readonly spec: ReadingSpec;
  /** Column names as the header has them (or "column 1" … when there is no header), and what was found in them. */
  readonly columns: readonly {
    readonly name: string;
    readonly unit: string | null;
    readonly sample: readonly string[];
  }[];
  /** First rows as text cells, for the preview table. At most 12. */
  readonly rows: readonly (readonly string[])[];
  /** Required and absent (a reading cannot be made without them): frameInterval, pixelSize. */
  readonly required: readonly Missing[];
  /** Absent but assumed, each assumption said in `notes`. */
  readonly assumed: readonly Missing[];
  /** Sentences for the person: what was assumed and why. */
  readonly notes: readonly string[];
}

/** Counts of what a reading found. Part of what intake shows and of what is stored with the reading. */
export interface ReadingSummary {
  readonly rows: number;
  readonly tracks: number;
  /** Distinct frames or times over all tracks. */
  readonly frames: number;
  readonly longestTrackFrames: number;
  readonly shortestTrackFrames: number;
  readonly gaps: number;
  readonly missingFrames: number;
  /** Seconds; as stated, else the median positive difference within tracks. */
  readonly frameInterval: number | null;
  readonly dims: number;
  readonly badRows: number;
  /** Bounding box, micrometres, one [min, max] an axis. */
  readonly bounds: readonly (readonly [number, number])[];
}

/** The paths in the plane for the preview: at most 60 tracks of at most 400 points each, micrometres. */
export interface PathPreview {
  readonly tracks: readonly {
    readonly id: string;
    readonly x: readonly number[];
    readonly y: readonly number[];
  }[];
  readonly shown: number;
  readonly of: number;
}
