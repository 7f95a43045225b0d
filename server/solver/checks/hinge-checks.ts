import type { ActionValue, EstimateReceptor, OpenWater } from '../../../shared/schemas/estimate';
import type { Check, ReceptorAnswer } from '../../../shared/schemas/estimate-result';
import { concentrationText, sig } from '../format';
import { receptorAnswer } from '../results/receptor-answer';
import type { RunInput, Solver } from '../types';

/** Shares of the wind at which the upper metres may move: 3 % at the surface, 1 to 2 % over 1 to 5 m (common practice, no source). */
const DRIFTS = [0.01, 0.02, 0.03];
/** Receptors looked at: those nearest to a release. */
const MOST_RECEPTORS = 8;

/** What a receptor sees at one share of the wind: the likely peak without losses and with them. */
type Seen = { readonly drift: number; readonly peaks: readonly number[] };

/**
 * Where the current is a share of the wind, that share is a guess, and so is what evaporates or decays on the way. This
 * solves the water again with each share of the wind, without and with losses, and says of which receptors it depends on
 * these guesses whether an action value is exceeded.
 */
export function hingeChecks(input: RunInput, solver: Solver, answers: readonly ReceptorAnswer[]): Check[] {
  const { doc } = input;
  const { water } = doc;
  if (water.kind !== 'open' || !water.current.some((part) => part.kind === 'wind') || input.weights.isPerUnit) return [];
  const watched = answers
    .map((answer, index) => ({ answer, index, receptor: doc.receptors[index]! }))
    .filter(({ answer, receptor }) => receptor.actionValues.length > 0 && answer.distanceM !== null && answer.verdict !== 'cannot be estimated')
    .sort((a, b) => a.answer.distanceM! - b.answer.distanceM! || a.index - b.index)
    .slice(0, MOST_RECEPTORS);
  if (watched.length === 0) return [];
  const seen = DRIFTS.map((drift) => seenAt(input, solver, water, drift, watched));
  return watched.flatMap(({ receptor }, n) => hinge(receptor, seen.map((row) => row[n]!), input));
}

function seenAt(input: RunInput, solver: Solver, water: OpenWater, drift: number, watched: readonly { index: number; receptor: EstimateReceptor }[]): Seen[] {
  const current = water.current.map((part) => (part.kind === 'wind' ? { ...part, driftFraction: drift } : part));
  const varied: RunInput = { ...input, doc: { ...input.doc, water: { ...water, current } } };
  const field = solver.prepare(varied);
  return watched.map(({ index, receptor }) => {
    const answer = receptorAnswer(varied, receptor, field.receptor(index, receptor));
    return { drift, peaks: [answer.peak.likely ?? 0, ...(answer.withLosses ? [answer.withLosses.peak] : [])] };
  });
}

function hinge(receptor: EstimateReceptor, seen: readonly Seen[], { doc }: RunInput): Check[] {
  const isOpen = ({ value }: ActionValue): boolean => {
    const above = seen.flatMap(({ peaks }) => peaks.map((peak) => peak > value));
    return above.includes(true) && above.includes(false);
  };
  const action = receptor.actionValues.find(isOpen);
  if (!action) return [];
  const text = (value: number): string => concentrationText(value, doc.substance.measure);
  const words = seen.map(({ drift, peaks }) => `${sig(100 * drift, 2)} % of the wind ${text(peaks[0]!)}${peaks.length > 1 ? `, with losses ${text(peaks[1]!)}` : ''}`);
  return [
    {
      code: 'hinges-on-drift',
      severity: 'warn',
      title: 'Cannot say: hinges on the wind drift or on losses',
      detail: `Whether ${text(action.value)} is exceeded depends on them: peak at ${words.join('; ')}.`,
      remedy: 'Act as if it were reached; measure drift with a float and the loss with samples, and draw from below the mixed layer where the intake can.',
      receptorId: receptor.id,
    },
  ];
}
