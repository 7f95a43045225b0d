import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import type { Check, ReceptorAnswer } from '../../../shared/schemas/estimate-result';
import { concentrationText, durationText, sig } from '../format';
import { kdOf, settlingMpsOf } from '../losses/process-rate';
import { GRAVITY_MPS2 } from '../physics/channel-mixing';
import type { RunInput } from '../types';
import { FRESH_KGM3, type PlaceWater } from './place-water';
import { checksBy, type Rule } from './rule';

/** g' h / U^2 from which a cloud of another density sinks or rises (common practice, no source). */
const LAYERING = { warn: 0.1, stop: 1 } as const;
/** Change of discharge during the travel, over the discharge (common practice, no source). */
const UNSTEADY_SHARE = 0.2;
/** Oxygen demand that is felt, kg/m3: a few mg/L (common practice, no source). */
const OXYGEN_KGM3 = 3e-3;
const SORBED = 0.1;
const SETTLED = 0.1;
const LONG_RELEASE = 0.2;

/** What is known of one receptor once it is answered. */
export type AnswerFacts = { readonly input: RunInput; readonly receptor: EstimateReceptor; readonly answer: ReceptorAnswer; readonly water: PlaceWater };

const peakOf = ({ answer }: AnswerFacts): number => answer.peak.high ?? answer.peak.likely ?? 0;
const isKnown = ({ input }: AnswerFacts): boolean => !input.weights.isPerUnit && input.doc.substance.measure === 'mass';

/** From the start of the first release to the likely peak, s; 0 where nothing arrives. */
const travelS = ({ input, answer }: AnswerFacts): number => (answer.peakS === null ? 0 : Math.max(0, answer.peakS - Math.min(...input.releases.map((release) => release.profile.startS))));

/** g' h / U^2 of the peak, from the densities of product and water. */
function layering(facts: AnswerFacts): { value: number; text: string } | null {
  const { densityKgM3 } = facts.input.doc.substance;
  if (densityKgM3 === null || !isKnown(facts) || peakOf(facts) === 0) return null;
  const share = peakOf(facts) * Math.abs(1 / FRESH_KGM3 - 1 / densityKgM3);
  const { depthM, speedMps } = facts.water;
  const value = (GRAVITY_MPS2 * share * depthM) / speedMps ** 2;
  return { value, text: `At its peak of ${concentrationText(peakOf(facts), 'mass')} the water is ${sig(share * FRESH_KGM3, 3)} kg/m³ ${densityKgM3 > FRESH_KGM3 ? 'heavier' : 'lighter'}: g'h/U² = ${sig(value, 3)} over ${sig(depthM, 3)} m at ${sig(speedMps, 3)} m/s` };
}

/** Sorption and settling as stated for the substance, or by a settling process. */
function particlesOf({ input }: AnswerFacts): { kdM3Kg: number; settlingMps: number; suspendedKgM3: number } {
  const settling = input.doc.substance.losses?.find((process) => process.kind === 'settling');
  const behaviour = input.doc.substance.behaviour ?? {};
  return {
    kdM3Kg: behaviour.kdM3Kg ?? (settling ? kdOf(settling.partition) : 0),
    settlingMps: behaviour.settlingMps ?? (settling ? settlingMpsOf(settling.particles) : 0),
    suspendedKgM3: input.doc.conditions?.suspendedKgM3 ?? 0,
  };
}

export const answerRules: readonly Rule<AnswerFacts>[] = [
  {
    code: 'density-layering',
    severity: 'stop',
    title: 'Runs under or over the water',
    test(facts) {
      const found = layering(facts);
      return found && found.value > LAYERING.stop ? { detail: `${found.text}, above ${LAYERING.stop}.`, remedy: 'A mixed estimate does not hold here: expect it along the bed or the surface, arriving earlier, and sample there.' } : null;
    },
  },
  {
    code: 'density-tends',
    severity: 'warn',
    title: 'Tends to sink or rise',
    test(facts) {
      const found = layering(facts);
      return found && found.value > LAYERING.warn && found.value <= LAYERING.stop ? { detail: `${found.text}, above ${LAYERING.warn}.`, remedy: 'Sample bed and surface; one of them carries more than the figure.' } : null;
    },
  },
  {
    code: 'above-density',
    severity: 'warn',
    title: 'More than the pure product',
    test(facts) {
      const { densityKgM3 } = facts.input.doc.substance;
      return densityKgM3 !== null && isKnown(facts) && peakOf(facts) > densityKgM3 ? { detail: `The peak of ${sig(peakOf(facts), 3)} kg/m³ is above the density of the product, ${sig(densityKgM3, 4)} kg/m³.`, remedy: 'Give the first cloud its size, or the volume spilled.' } : null;
    },
  },
  {
    code: 'at-strength',
    severity: 'warn',
    title: 'As strong as what was spilled',
    test(facts) {
      const peak = facts.answer.peak.likely ?? 0;
      const strongest = facts.input.releases.reduce((sum, { capPerKg, index }) => sum + facts.input.weights.likely[index]! * capPerKg, 0);
      return isKnown(facts) && peak > 0 && peak >= 0.999 * strongest ? { detail: `The peak reaches amount over volume spilled, ${sig(strongest, 3)} kg/m³, and is held there.`, remedy: 'Undiluted product is meant: estimate from farther away, or give the first cloud its size.' } : null;
    },
  },
  {
    code: 'rising-stage',
    severity: 'warn',
    title: 'The river rises or falls meanwhile',
    test(facts) {
      const change = facts.input.doc.conditions?.dischargeChangeM3sPerS;
      const { dischargeM3s } = facts.water;
      if (!change || !dischargeM3s || (facts.input.doc.water.kind === 'river' && facts.input.doc.water.flow.series)) return null;
      const share = (Math.abs(change) * travelS(facts)) / dischargeM3s;
      return share > UNSTEADY_SHARE
        ? { detail: `In the ${durationText(travelS(facts))} of travel the discharge changes by ${sig(100 * share, 3)} % of ${sig(dischargeM3s, 3)} m³/s; up to ${100 * UNSTEADY_SHARE} % a steady flow will do. The wave runs at about ${sig((5 / 3) * facts.water.speedMps, 3)} m/s and overtakes the cloud.`, remedy: 'Give the discharge as a series, or set it anew and shorten the estimate.' }
        : null;
    },
  },
  {
    code: 'sorbing',
    severity: 'warn',
    title: 'Clings to particles or settles',
    test(facts) {
      const { kdM3Kg, settlingMps, suspendedKgM3 } = particlesOf(facts);
      const sorbed = kdM3Kg * suspendedKgM3;
      const settled = (settlingMps * travelS(facts)) / facts.water.depthM;
      return sorbed > SORBED || settled > SETTLED
        ? { detail: `Kd times suspended matter is ${sig(sorbed, 3)} (dissolved share ${sig(1 / (1 + sorbed), 3)}), particles sink ${sig(settled, 3)} depths on the way; up to ${SORBED} either may be left out.`, remedy: 'Read the figures as total; the dissolved part is less, and the bed keeps some: sample it too.' }
        : null;
    },
  },
  {
    code: 'oxygen-demand',
    severity: 'warn',
    title: 'May use up the oxygen',
    test(facts) {
      const demand = (facts.input.doc.substance.behaviour?.oxygenDemandKgPerKg ?? 0) * peakOf(facts);
      return isKnown(facts) && demand > OXYGEN_KGM3
        ? { detail: `The peak takes ${concentrationText(demand, 'mass')} of oxygen to break down; a few mg/L (${concentrationText(OXYGEN_KGM3, 'mass')}) are felt.`, remedy: 'The lowest oxygen comes a day or more below: it is not in these figures; warn fisheries and aerate.' }
        : null;
    },
  },
  {
    code: 'long-release',
    severity: 'note',
    title: 'The release is long beside the travel',
    test(facts) {
      const travel = travelS(facts);
      const longest = Math.max(...facts.input.releases.map(({ profile }) => profile.stopS - profile.startS));
      return travel > 0 && longest >= LONG_RELEASE * travel ? { detail: `It lasts ${durationText(longest)}, ${sig(longest / travel, 2)} of the ${durationText(travel)} to the peak; it is followed as it was given.`, remedy: 'Mend start, end and rates as they become known: they decide the peak.' } : null;
    },
  },
];

export const answerChecks = (facts: AnswerFacts): Check[] => checksBy(answerRules, facts, facts.receptor.id);
