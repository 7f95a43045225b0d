import type { Check } from '../../../shared/schemas/estimate-result';
import { durationText, lengthText, sig } from '../format';
import { GRAVITY_MPS2 } from '../physics/channel-mixing';
import type { ResolvedRelease } from '../release-profile';
import type { RunInput } from '../types';
import { FRESH_KGM3, type PlaceWater } from './place-water';
import { checksBy, type Rule } from './rule';

/** Layers hold apart above this bulk Richardson number. Source: Turner 1973, Buoyancy Effects in Fluids (Miles & Howard's 1/4). */
const LAYERS_RICHARDSON = 0.25;
/** Estuary Richardson numbers between mixed, partly and strongly layered. Source: Fischer et al. 1979, section 7.2. */
const ESTUARY_PARTLY = 0.08;
const ESTUARY_STRONGLY = 0.8;
/** Dead water over flowing section from which tails are long (common practice, no source). */
const DEAD_SHARE = 0.3;
const OLDEST_S = 31 * 86_400;
const FLOW_RATIO = [0.1, 5] as const;

/** A run with the water at its first release. */
export type ConditionFacts = { readonly input: RunInput; readonly water: PlaceWater };

const conditionsOf = ({ input }: ConditionFacts) => input.doc.conditions ?? {};
const behaviourOf = ({ input }: ConditionFacts) => input.doc.substance.behaviour ?? {};
const reachesOf = ({ input }: ConditionFacts) => (input.doc.water.kind === 'river' ? input.doc.water.reaches : []);

/** g step h / (rho U^2), Infinity in still water. */
export const layerRichardson = (stepKgM3: number, layerM: number, speedMps: number): number => (GRAVITY_MPS2 * stepKgM3 * layerM) / (FRESH_KGM3 * speedMps ** 2);

function layers(facts: ConditionFacts): { text: string; isAcross: boolean } | null {
  const { stratification } = conditionsOf(facts);
  if (!stratification || stratification.densityStepKgM3 === 0) return null;
  const { densityStepKgM3, layerDepthM } = stratification;
  const richardson = layerRichardson(densityStepKgM3, layerDepthM, facts.water.speedMps);
  if (richardson <= LAYERS_RICHARDSON) return null;
  return {
    text: `A step of ${sig(densityStepKgM3, 3)} kg/m³ under ${sig(layerDepthM, 3)} m at ${sig(facts.water.speedMps, 3)} m/s is a Richardson number of ${sig(richardson, 3)}, above ${LAYERS_RICHARDSON}; the estimate mixes over ${sig(facts.water.depthM, 3)} m.`,
    isAcross: facts.water.depthM > layerDepthM * (1 + 1e-9),
  };
}

/** (step/rho) g Qf / (W Ut^3). */
function estuaryNumber(facts: ConditionFacts): number | null {
  const { estuary } = conditionsOf(facts);
  return estuary ? ((estuary.densityStepKgM3 / FRESH_KGM3) * GRAVITY_MPS2 * estuary.freshM3s) / (estuary.widthM * estuary.tidalSpeedMps ** 3) : null;
}

const mixesWhole = ({ input }: ConditionFacts): boolean => input.doc.water.kind === 'river' || input.doc.water.mixingDepthM >= 0.99 * input.doc.water.depthM;

/** Strongest concentration of a release where it starts, kg/m3, and the density difference it makes, kg/m3. */
function firstPatch({ input, water }: ConditionFacts, { release, amount, capPerKg }: ResolvedRelease): { stepKgM3: number; depthM: number } | null {
  const { densityKgM3, measure } = input.doc.substance;
  if (densityKgM3 === null || measure === 'count' || capPerKg === Infinity || amount.likely === null) return null;
  const stepKgM3 = FRESH_KGM3 * amount.likely * capPerKg * Math.abs(1 / FRESH_KGM3 - 1 / densityKgM3);
  const area = Math.PI * release.initialRadiusM ** 2;
  return { stepKgM3, depthM: area > 0 ? Math.min(water.depthM, 1 / (capPerKg * area)) : water.depthM };
}

export const conditionRules: readonly Rule<ConditionFacts>[] = [
  {
    code: 'layers-mixed',
    severity: 'stop',
    title: 'Mixed across a density step',
    test(facts) {
      const found = layers(facts);
      return found?.isAcross ? { detail: found.text, remedy: 'Mix over the layer of the release only: set the mixing depth to its thickness.' } : null;
    },
  },
  {
    code: 'layers',
    severity: 'warn',
    title: 'The water lies in layers',
    test(facts) {
      const found = layers(facts);
      return found && !found.isAcross ? { detail: found.text, remedy: 'Mixing down is 10 to 100 times slower than in even water: figures hold for this layer; those below it may stay clear.' } : null;
    },
  },
  {
    code: 'estuary-layered',
    severity: 'stop',
    title: 'Strongly layered estuary mixed over its whole depth',
    test(facts) {
      const number = estuaryNumber(facts);
      return number !== null && number > ESTUARY_STRONGLY && mixesWhole(facts) ? { detail: `The estuary number is ${sig(number, 3)}, above ${ESTUARY_STRONGLY}: salt and fresh water flow apart.`, remedy: 'Estimate the layer of the release as open water with its thickness as mixing depth.' } : null;
    },
  },
  {
    code: 'estuary-partly-layered',
    severity: 'warn',
    title: 'Partly layered estuary',
    test(facts) {
      const number = estuaryNumber(facts);
      return number !== null && number > ESTUARY_PARTLY && !(number > ESTUARY_STRONGLY && mixesWhole(facts)) ? { detail: `The estuary number is ${sig(number, 3)}; below ${ESTUARY_PARTLY} it would be mixed.`, remedy: 'Surface and bed water move differently: sample both.' } : null;
    },
  },
  {
    code: 'gravity-spreading',
    severity: 'warn',
    title: 'The first patch spreads by its own weight',
    test(facts) {
      for (const release of facts.input.releases) {
        const patch = firstPatch(facts, release);
        if (!patch || facts.water.shearMps <= 0) continue;
        const richardson = (GRAVITY_MPS2 * patch.stepKgM3 * patch.depthM) / (FRESH_KGM3 * facts.water.shearMps ** 2);
        if (richardson > 1)
          return { detail: `${release.release.name}: ${sig(patch.stepKgM3, 3)} kg/m³ denser or lighter over ${sig(patch.depthM, 3)} m at a shear velocity of ${sig(facts.water.shearMps, 3)} m/s is a Richardson number of ${sig(richardson, 3)}, above 1.`, remedy: 'It runs under or over the water before it mixes: expect it wider at the start and along the bed or surface.' };
      }
      return null;
    },
  },
  {
    code: 'ice',
    severity: 'warn',
    title: 'Under ice',
    test: (facts) =>
      conditionsOf(facts).ice
        ? { detail: `A cover halves the hydraulic radius (${sig(facts.water.depthM / 2, 3)} m of ${sig(facts.water.depthM, 3)} m) and rubs on the flow; nothing volatilises and no wind drives the surface.`, remedy: 'Measure velocity under the ice; coefficients from open water do not carry over.' }
        : null,
  },
  {
    code: 'reactive',
    severity: 'warn',
    title: 'It reacts in the water',
    test(facts) {
      const { isAcidOrBase, isReactive, gas } = behaviourOf(facts);
      if (!isAcidOrBase && !isReactive && !gas) return null;
      const what = [isAcidOrBase ? `acid or base${neutralText(facts)}` : '', isReactive ? 'reactive' : '', gas ? `may give off ${gas}` : ''].filter(Boolean).join(', ');
      return { detail: `${facts.input.doc.substance.name}: ${what}. The figures are dilution, not toxicity or pH.`, remedy: 'Measure pH on site, keep upwind, and do not read pH from a linear dilution.' };
    },
  },
  {
    code: 'acid-flux',
    severity: 'warn',
    title: 'More acid or base than the river neutralises',
    test(facts) {
      const { equivalentsPerKg } = behaviourOf(facts);
      const { alkalinityEqM3 } = conditionsOf(facts);
      const { dischargeM3s } = facts.water;
      if (!equivalentsPerKg || !alkalinityEqM3 || !dischargeM3s) return null;
      const flux = facts.input.releases.reduce((sum, { amount, profile }) => sum + (profile.isInstant ? 0 : ((amount.likely ?? 0) * equivalentsPerKg) / (profile.stopS - profile.startS)), 0);
      return flux > dischargeM3s * alkalinityEqM3
        ? { detail: `${sig(flux, 3)} eq/s are released; the river brings ${sig(dischargeM3s * alkalinityEqM3, 3)} eq/s of alkalinity (${sig(dischargeM3s, 3)} m³/s at ${sig(alkalinityEqM3, 3)} eq/m³).`, remedy: 'Expect the pH to break down until more water joins; warn fisheries and intakes by pH, not by concentration.' }
        : null;
    },
  },
  {
    code: 'reservoir',
    severity: 'warn',
    title: 'Still water on the way',
    test: (facts) =>
      conditionsOf(facts).hasReservoir && !reachesOf(facts).some((reach) => reach.structure)
        ? { detail: 'A reservoir, lock or weir lies on the way, and no reach holds its volume: 0 m³ of stirred water in the estimate.', remedy: 'Add it to its reach with its volume; it delays by volume over discharge and lowers the peak.' }
        : null,
  },
  {
    code: 'dead-zones',
    severity: 'warn',
    title: 'Dead water keeps part of the cloud',
    test(facts) {
      const { deadZoneShare = 0, isWeedyOrBraided } = conditionsOf(facts);
      if (reachesOf(facts).some((reach) => reach.storage) || (!isWeedyOrBraided && deadZoneShare <= DEAD_SHARE)) return null;
      return { detail: `${isWeedyOrBraided ? 'Weedy or braided water; d' : 'D'}ead water over flowing section ${sig(deadZoneShare, 3)}; from ${DEAD_SHARE} on tails are long.`, remedy: 'Give the reaches their storage, or expect a later peak and a tail several times as long.' };
    },
  },
  {
    code: 'tide-missing',
    severity: 'warn',
    title: 'Tidal water without a tide',
    test({ input: { doc } }) {
      if (doc.water.kind !== 'open' || doc.water.waterKind !== 'estuary' || doc.water.openEdge || doc.water.box) return null;
      return doc.water.current.some((part) => part.kind === 'tide' || part.kind === 'series') || (doc.water.measuredCurrents ?? []).length > 0
        ? null
        : { detail: `${doc.water.name} is an estuary, and 0 tidal parts are among its ${doc.water.current.length} currents: only the net flow is followed.`, remedy: 'Add the tidal current; the water moves up and down by speed times period over π each tide.' };
    },
  },
  {
    code: 'extrapolation-age',
    severity: 'warn',
    title: 'Older than any dye patch that was followed',
    test({ input: { doc, releases } }) {
      const ageS = doc.horizonS - Math.min(...releases.map((release) => release.profile.startS));
      return ageS > OLDEST_S ? { detail: `At the end the oldest matter has been in the water for ${durationText(ageS)}; data end at one month (${durationText(OLDEST_S)}).`, remedy: 'Shorten the estimate and start anew from samples.' } : null;
    },
  },
  {
    code: 'extrapolation-flow',
    severity: 'warn',
    title: 'Far from the mean flow',
    test(facts) {
      const { meanDischargeM3s } = conditionsOf(facts);
      const { dischargeM3s } = facts.water;
      if (!meanDischargeM3s || !dischargeM3s) return null;
      const ratio = dischargeM3s / meanDischargeM3s;
      return ratio < FLOW_RATIO[0] || ratio > FLOW_RATIO[1]
        ? { detail: `${sig(dischargeM3s, 3)} m³/s is ${sig(ratio, 3)} times the mean flow of ${sig(meanDischargeM3s, 3)} m³/s; travel times are known between ${FLOW_RATIO[0]} and ${FLOW_RATIO[1]} times.`, remedy: 'Measure the velocity; read times as rough.' }
        : null;
    },
  },
];

/** Water that would neutralise the release, in words. */
function neutralText(facts: ConditionFacts): string {
  const { equivalentsPerKg } = behaviourOf(facts);
  const { alkalinityEqM3 } = conditionsOf(facts);
  if (!equivalentsPerKg) return '';
  const equivalents = facts.input.releases.reduce((sum, { amount }) => sum + (amount.likely ?? 0) * equivalentsPerKg, 0);
  const volume = alkalinityEqM3 ? `, neutralised by ${sig(equivalents / alkalinityEqM3, 3)} m³ of this water (a cube of ${lengthText(Math.cbrt(equivalents / alkalinityEqM3))})` : '';
  return ` (${sig(equivalents, 3)} equivalents${volume})`;
}

export const conditionChecks = (facts: ConditionFacts): Check[] => checksBy(conditionRules, facts, null);
