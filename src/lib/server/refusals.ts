/** Why a submission is not taken, in sentences for who submits. */
import type { LimitName } from '../domain/limits';

/** A person's mistake in what they submit. */
export class SubmissionError extends Error {}

/** A submission above a limit. */
export class LimitError extends SubmissionError {
  constructor(
    readonly limit: LimitName,
    message: string,
  ) {
    super(message);
  }

  /** What the REST interface answers: tasks end by themselves, so waiting helps there; the rest only people raise. */
  get status(): 403 | 429 {
    return this.limit === 'queuedTasks' ? 429 : 403;
  }
}
