import type { OpenWater } from '../../../shared/schemas/estimate';
import type { WorkingLine } from '../../../shared/schemas/estimate-result';
import { sig } from '../format';
import { growthLawOf } from './spread';

const LAW_SOURCES = { 'four-thirds': 'Richardson 1926, Batchelor 1950', okubo: 'Okubo 1971', lake: 'Lawrence et al. 1995' };

/** How a method words its spreading: by age and by a constant tensor. */
export type SpreadWording = { readonly agedFormula: string; readonly agedNote: string; readonly constantFormula: string; readonly turning: string };

/** Working of the spreading of open water. */
export function spreadLine({ mixing, coefficientNote }: OpenWater, wording: SpreadWording): WorkingLine {
  const label = 'Spread';
  switch (mixing.kind) {
    case 'okubo':
      return { label, formula: wording.agedFormula, substituted: `f = ${sig(mixing.varianceFactor)}${wording.agedNote}`, value: mixing.varianceFactor, unit: 'times', source: 'Okubo 1971' };
    case 'growing': {
      const law = growthLawOf(mixing);
      return {
        label,
        formula: `K = a l^n, l = c σ, dσ²/dt = 2 K${law.isApparent ? ' / (1 − n/2), K being apparent' : ''}`,
        substituted: `a = ${sig(law.coefficient)}, n = ${sig(law.exponent)}, c = ${sig(law.sizeOverSigma)}${law.mostM2s < Infinity ? `, K at most ${sig(law.mostM2s)} m²/s` : ''}`,
        value: law.coefficient,
        unit: 'm^(2−n)/s',
        source: LAW_SOURCES[mixing.law],
      };
    }
    case 'constant':
      return {
        label,
        formula: wording.constantFormula,
        substituted: `K_L = ${sig(mixing.alongM2s)} m²/s, K_T = ${sig(mixing.acrossM2s)} m²/s, ${mixing.turnsWithCurrent ? wording.turning : `long axis toward ${sig(mixing.axisTowardDeg)}°`}`,
        value: mixing.alongM2s,
        unit: 'm²/s',
        source: coefficientNote || 'stated in the water register',
      };
  }
}
