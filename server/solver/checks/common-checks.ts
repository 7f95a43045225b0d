import type { Check, ReceptorAnswer } from '../../../shared/schemas/estimate-result';
import { durationText, sig } from '../format';
import { openWaterSolver } from '../open/open-solver';
import { solverFor } from '../solvers';
import type { Books, RunInput } from '../types';
import { checksBy, type Rule } from './rule';

/** Water, kg/m3, for the floats-or-sinks rules. */
const WATER_KGM3 = 1_000;
/** Least soluble product that still counts as dissolving, kg/m3 (usual thresholds of practice, from memory). */
const FLOATER_SOLUBLE_KGM3 = 1;
const SINKER_SOLUBLE_KGM3 = 10;

type Facts = { readonly input: RunInput; readonly answers: readonly ReceptorAnswer[]; readonly books: Books; readonly cappedValues: number };

const productRule = (code: string, title: string, isHeavy: boolean, remedy: string): Rule<Facts> => ({
  code,
  severity: 'warn',
  title,
  test({ input }) {
    const { densityKgM3, solubilityKgM3 } = input.doc.substance;
    if (densityKgM3 === null || solubilityKgM3 === null) return null;
    const isMeant = isHeavy ? densityKgM3 > WATER_KGM3 && solubilityKgM3 < SINKER_SOLUBLE_KGM3 : densityKgM3 < WATER_KGM3 && solubilityKgM3 < FLOATER_SOLUBLE_KGM3;
    return isMeant ? { detail: `Density ${sig(densityKgM3)} kg/m³, solubility ${sig(solubilityKgM3)} kg/m³.`, remedy } : null;
  },
});

const rules: readonly Rule<Facts>[] = [
  {
    code: 'amount-unknown',
    severity: 'warn',
    title: 'Amount not known',
    test({ input }) {
      const unknown = input.releases.filter((release) => release.amount.likely === null);
      if (unknown.length === 0) return null;
      const names = unknown.map((release) => release.release.name).join(', ');
      return { detail: `${names}: no amount and no stand-in.`, remedy: input.weights.isPerUnit ? 'Figures are for 1 kg; give a low, likely and high amount as soon as there is a guess.' : 'Figures leave it out; give an amount as soon as there is a guess.' };
    },
  },
  {
    code: 'amount-stand-in',
    severity: 'warn',
    title: 'Planned amount in place of an unknown one',
    test({ input }) {
      const standIns = input.releases.filter((release) => release.amount.isStandIn);
      return standIns.length > 0 ? { detail: standIns.map(({ release, amount }) => `${release.name}: ${sig(amount.likely ?? 0)}`).join('; ') + '.', remedy: 'Replace it by what is known to have been released.' } : null;
    },
  },
  {
    code: 'capped',
    severity: 'warn',
    title: 'Capped at what the water can dissolve',
    test: ({ input, cappedValues }) =>
      cappedValues > 0
        ? { detail: `${cappedValues} values reach the solubility of ${sig(input.doc.substance.solubilityKgM3 ?? 0)} kg/m³.`, remedy: 'Product stays undissolved and goes on releasing: add a longer release for it.' }
        : null,
  },
  productRule('floats', 'The product floats and dissolves little', false, 'A slick moves with wind and current and evaporates: give the dissolved part only as the amount.'),
  productRule('sinks', 'The product sinks and dissolves slowly', true, 'It pools on the bed and dissolves for days: give the release as a long one.'),
  {
    code: 'horizon-short',
    severity: 'warn',
    title: 'The estimate ends too early',
    test({ input, answers }) {
      const { horizonS, receptors } = input.doc;
      const cut = answers.filter((answer) => answer.answers.some((item) => item.endOpen) || (answer.peakS !== null && answer.peakS > 0.995 * horizonS && (answer.answers.some((item) => (item.ratio ?? 0) > 0.1) || answer.answers.length === 0)));
      if (cut.length === 0) return null;
      const names = cut.slice(0, 4).map((answer) => receptors.find((receptor) => receptor.id === answer.receptorId)?.name ?? answer.receptorId);
      return { detail: `At its end, ${durationText(horizonS)} after T0, the concentration is still above or rising at ${names.join(', ')}${cut.length > 4 ? ` and ${cut.length - 4} more` : ''}.`, remedy: 'Lengthen the estimate to see peak and end.' };
    },
  },
  {
    code: 'over-land',
    severity: 'warn',
    title: 'The cloud is wider than the water',
    test: ({ books, input }) =>
      solverFor(input.doc) === openWaterSolver && books.left > 0.1 * books.released
        ? { detail: `At the end ${sig((100 * books.left) / books.released, 2)} % of the cloud lies beyond the drawn shore; the closed form knows no shore but a straight one.`, remedy: 'Near the shore read up to twice the concentration; use a straight shore where one fits, or solve it on a grid within its shore.' }
        : null,
  },
];

export const commonChecks = (facts: Facts): Check[] => checksBy(rules, facts, null);
