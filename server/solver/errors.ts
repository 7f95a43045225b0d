import type { FieldError } from '../../shared/problem';

/** The document cannot be solved as it stands: each entry names the field, the value it got and the remedy. */
export class SolverInputError extends Error {
  constructor(readonly errors: FieldError[]) {
    super(errors.map((error) => `${error.path}: ${error.message}`).join('\n'));
    this.name = 'SolverInputError';
  }
}

/** The caller asked to stop. */
export class SolverCancelled extends Error {
  constructor() {
    super('The estimate was cancelled');
    this.name = 'SolverCancelled';
  }
}

/** The solution blew up: a fault of the solver or of figures far outside its range, never shown as a picture. */
export class SolverDivergedError extends Error {
  constructor(readonly step: number, readonly timeS: number, readonly cell: string, why = 'the concentration is not a number') {
    super(`The solution broke down at step ${step}, ${timeS.toPrecision(6)} s after T0, in cell ${cell}: ${why}`);
    this.name = 'SolverDivergedError';
  }
}
