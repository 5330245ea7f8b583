import { analyse, ENGINE_VERSION } from '../analyse';
import { readTrajectories, type ReadOutcome } from '../intake/read-trajectories';
import { takeIn } from '../intake/take-in';
import type { IntakeFailure } from '../intake/types';
import type { AnalysisFailure, AnalysisResult, Trajectories } from '../types';
import type { IntakeAnswer, ReadSummary, WorkerAnswers, WorkerRequest } from './messages';

/** The thin switch of a worker: calls the pure functions and leaves out what need not travel. */
export function handle(request: WorkerRequest): WorkerAnswers[WorkerRequest['kind']] {
  switch (request.kind) {
    case 'intake':
      return intake(request);
    case 'read':
      return summaryOf(readTrajectories(request.bytes, request.spec));
    case 'analyse':
      return analyseFiles(request);
  }
}

function intake(request: Extract<WorkerRequest, { kind: 'intake' }>): IntakeAnswer {
  const { inspection, read } = takeIn(request.bytes, request.name, request.stated, request.spec);
  return { inspection, read: read && summaryOf(read) };
}

function summaryOf(outcome: ReadOutcome | IntakeFailure): ReadSummary | IntakeFailure {
  if (outcome.failed) return outcome;
  const { trajectories: _columns, ...summary } = outcome;
  return summary;
}

function analyseFiles(
  request: Extract<WorkerRequest, { kind: 'analyse' }>,
): AnalysisResult | AnalysisFailure {
  const readings: Trajectories[] = [];
  for (const { bytes, spec, hash, name } of request.readings) {
    const outcome = readTrajectories(bytes, spec);
    if (outcome.failed) {
      return {
        failed: true,
        engine: ENGINE_VERSION,
        code: outcome.code,
        message: `${name}: ${outcome.message}`,
      };
    }
    readings.push({ ...outcome.trajectories, hash });
  }
  return analyse(readings, request.settings);
}
