import type { Check } from '../../../shared/schemas/estimate-result';

/**
 * One validity rule. `test` gives the numbers that tripped it and the remedy, or null while it holds.
 * A `stop` means that the answer it concerns cannot be given.
 */
export type Rule<Facts> = {
  readonly code: string;
  readonly severity: Check['severity'];
  readonly title: string;
  test(facts: Facts): { detail: string; remedy: string } | null;
};

/** All rules that are tripped, in the order of the table. */
export const checksBy = <Facts>(rules: readonly Rule<Facts>[], facts: Facts, receptorId: string | null): Check[] =>
  rules.flatMap((rule) => {
    const tripped = rule.test(facts);
    return tripped ? [{ code: rule.code, severity: rule.severity, title: rule.title, ...tripped, receptorId }] : [];
  });
