import type { EstimateResult, ReceptorAnswer } from '../../../shared/schemas/estimate-result';
import { durationText, sig } from '../format';
import type { PreparedField, RunInput, Solver } from '../types';
import { receptorAnswer } from './receptor-answer';

type Resolution = NonNullable<EstimateResult['diagnostics']['resolution']>;

/** Receptors solved a second time. */
const MOST_RECEPTORS = 3;
/** The coarser solution asks this much less of the release-time integral. */
const LOOSER = 100;

/** Solves the receptors that matter most once more with coarser cells, steps and integrals, and tells what that changes. */
export function resolutionOf(input: RunInput, solver: Solver, field: PreparedField, answers: readonly ReceptorAnswer[]): Resolution {
  const fine = field.numerics?.resolution ?? 'Closed form: no grid and no steps stand behind the receptor answers';
  const chosen = thatMatter(answers);
  if (chosen.length === 0) return { words: `${fine}. No receptor is reached, so no coarser solution was compared.`, peakChange: null, arrivalChangeS: null };
  const coarse: RunInput = { ...input, isPreview: true, tolerance: Math.min(1e-2, Math.max(1e-4, LOOSER * input.tolerance)), meter: input.meter.fork() };
  const coarseField = solver.prepare(coarse);
  let peakChange = 0;
  let arrivalChangeS: number | null = null;
  let turned = 0;
  for (const index of chosen) {
    input.meter.assertWanted();
    const receptor = input.doc.receptors[index]!;
    const before = answers[index]!;
    const after = receptorAnswer(coarse, receptor, coarseField.receptor(index, receptor));
    peakChange = Math.max(peakChange, Math.abs(after.peak.likely! / before.peak.likely! - 1));
    before.answers.forEach((answer, k) => {
      const [was, is] = [answer.arrivalS.likely, after.answers[k]!.arrivalS.likely];
      if ((was === null) !== (is === null)) turned++;
      else if (was !== null && is !== null) arrivalChangeS = Math.max(arrivalChangeS ?? 0, Math.abs(is - was));
    });
  }
  return { words: `${fine}. ${changeWords(field, input, coarse, chosen.length, peakChange, arrivalChangeS, turned)}`, peakChange, arrivalChangeS };
}

/** Positions of the receptors with the largest peak over their action value. */
const thatMatter = (answers: readonly ReceptorAnswer[]): number[] => {
  const weight = (answer: ReceptorAnswer): number => Math.max(0, ...answer.answers.map((item) => item.ratio ?? 0));
  return answers
    .map((_, index) => index)
    .filter((index) => answers[index]!.peak.likely! > 0)
    .sort((a, b) => weight(answers[b]!) - weight(answers[a]!) || answers[b]!.peak.likely! - answers[a]!.peak.likely! || a - b)
    .slice(0, MOST_RECEPTORS);
};

function changeWords(field: PreparedField, input: RunInput, coarse: RunInput, count: number, peakChange: number, arrivalChangeS: number | null, turned: number): string {
  const how = field.numerics ? 'With the coarser cells and steps of a preview' : `With the release-time integral loosened from ${sig(input.tolerance, 2)} to ${sig(coarse.tolerance, 2)} and fewer samples`;
  const where = count === 1 ? 'at the receptor that matters most' : `at the ${count} receptors that matter most`;
  const arrival = arrivalChangeS === null ? '' : ` and the arrival by ${arrivalChangeS < 1 ? 'less than 1 s' : `at most ${arrivalChangeS < 60 ? `${sig(arrivalChangeS, 2)} s` : durationText(arrivalChangeS)}`}`;
  const crossed = turned > 0 ? `; ${turned} ${turned === 1 ? 'answer stands' : 'answers stand'} on the other side of the action value: read ${turned === 1 ? 'it' : 'them'} as undecided` : '';
  return `${how} the peak changes by ${peakChange < 1e-4 ? 'less than 0.01' : `at most ${sig(100 * peakChange, 2)}`} %${arrival} ${where}${crossed}.`;
}
