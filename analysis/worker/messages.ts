import type { Stated } from '../intake/apply-stated';
import type { ReadOutcome } from '../intake/read-trajectories';
import type { Inspection, IntakeFailure, ReadingSpec } from '../intake/types';
import type { AnalysisFailure, AnalysisResult, AnalysisSettings } from '../types';

/** What a worker thread is asked, and what it answers. Plain data only, so that it crosses the thread's border. */
export type WorkerRequest =
  /** Understand a file; read it too when nothing is missing. A spec replaces the guess. */
  | {
      readonly kind: 'intake';
      readonly bytes: Uint8Array;
      readonly name: string;
      readonly stated: Stated;
      readonly spec: ReadingSpec | null;
    }
  | { readonly kind: 'read'; readonly bytes: Uint8Array; readonly spec: ReadingSpec }
  | {
      readonly kind: 'analyse';
      readonly readings: readonly {
        readonly bytes: Uint8Array;
        readonly spec: ReadingSpec;
        readonly hash: string;
        readonly name: string;
      }[];
      readonly settings: AnalysisSettings;
    };

/** What was read, without the columns themselves: they stay in the worker. */
export type ReadSummary = Omit<ReadOutcome, 'trajectories'>;

export interface IntakeAnswer {
  readonly inspection: Inspection | IntakeFailure;
  /** null while something required is missing. */
  readonly read: ReadSummary | IntakeFailure | null;
}

export interface WorkerAnswers {
  intake: IntakeAnswer;
  read: ReadSummary | IntakeFailure;
  analyse: AnalysisResult | AnalysisFailure;
}
