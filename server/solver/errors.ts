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
