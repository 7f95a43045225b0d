import { SolverCancelled } from './errors';

/** Counts work, keeps the worst error met, and stops the estimate when the caller asks. */
export class Meter {
  evaluations = 0;
  worstError = 0;
  private nextPoll = 0;

  constructor(private readonly isCancelled: () => boolean = () => false) {}

  count(evaluations: number): void {
    this.evaluations += evaluations;
    if (this.evaluations < this.nextPoll) return;
    this.nextPoll = this.evaluations + 20_000;
    this.assertWanted();
  }

  noteError(relative: number): void {
    if (relative > this.worstError) this.worstError = relative;
  }

  /** Counts apart from this one and stops with it. */
  fork(): Meter {
    return new Meter(this.isCancelled);
  }

  assertWanted(): void {
    if (this.isCancelled()) throw new SolverCancelled();
  }
}
