import { expect } from 'vitest';

/** Check values are quoted to 12 digits; closed forms and their independent routes agree to 1e-8 relative. */
export const CLOSED_FORM = 1e-8;

export function expectClose(got: number, wanted: number, relative = CLOSED_FORM): void {
  const error = Math.abs(got - wanted) / Math.abs(wanted);
  expect(error, `got ${got}, wanted ${wanted}`).toBeLessThanOrEqual(relative);
}
