import { analyse, ENGINE_VERSION } from '../analyse';
import { applyStated } from '../intake/apply-stated';
import { inspectFile, stillRequired } from '../intake/inspect-file';
import { readTrajectories, type ReadOutcome } from '../intake/read-trajectories';
import type { Inspection, IntakeFailure } from '../intake/types';
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
  const inspected = inspectFile(request.bytes, request.name);
  if (inspected.failed) return { inspection: inspected, read: null };
  const guessed = applyStated(inspected, request.stated);
  const inspection: Inspection = request.spec
    ? { ...guessed, spec: request.spec, required: stillRequired(request.spec) }
    : guessed;
  const read =
    inspection.required.length > 0 ? null : summaryOf(readTrajectories(request.bytes, inspection.spec));
  return { inspection, read };
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
