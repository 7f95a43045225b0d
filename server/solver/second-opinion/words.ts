import type { EstimateReceptor } from '../../../shared/schemas/estimate';
import { durationText, sig } from '../format';
import { BOUNDS } from './bounds';
import type { Agreement, OpinionFigure } from './compare';

export const BOUNDS_REASON =
  'A calibrated estimate is held to a factor of 2 in the peak and a quarter of the travel time in the arrival; two methods with the same figures that differ by more, beyond three standard errors of the sampling, cannot both be right.';

const nameOf = (receptor: EstimateReceptor): string => receptor.code || receptor.name;

/** "peak 1.1 times, arrival 4 min earlier" */
export function figureWords({ peakRatio, peakRatioError, arrivalDifferenceS, travelS }: OpinionFigure): string {
  const parts: string[] = [];
  if (peakRatio !== null) parts.push(`a peak ${sig(peakRatio, 2)}${peakRatioError ? ` ± ${sig(peakRatioError, 1)}` : ''} times as high`);
  if (arrivalDifferenceS !== null && travelS !== null) {
    const isSame = Math.abs(arrivalDifferenceS) < 60;
    parts.push(isSame ? 'the same arrival' : `an arrival ${durationText(Math.abs(arrivalDifferenceS))} ${arrivalDifferenceS < 0 ? 'earlier' : 'later'} on a way of ${durationText(travelS)}`);
  }
  return parts.join(' and ');
}

/** What a planner reads about the second method. */
export function opinionWords(method: string, agreement: Agreement, figures: readonly OpinionFigure[], receptors: readonly EstimateReceptor[], ashoreShare: number): string {
  const say = (grade: Agreement): string =>
    figures
      .filter((figure) => figure.agreement === grade)
      .map((figure) => `${nameOf(receptors.find((receptor) => receptor.id === figure.receptorId)!)}: ${figureWords(figure)}`)
      .join('; ');
  const sentences: string[] = [];
  if (agreement === 'none') sentences.push(`A second method (${method}) was run, but too little reaches any receptor for it to tell.`);
  if (agreement === 'agrees') sentences.push(`A second method (${method}) agrees. ${say('agrees')}.`);
  if (agreement === 'differs') sentences.push(`A second method (${method}) differs, but not so far that an answer is withdrawn: read these figures as rough. ${say('differs')}.`);
  if (agreement === 'disagrees')
    sentences.push(`Two methods disagree: the second (${method}) gives, against the first, at ${say('disagrees')}. Beyond a factor of ${BOUNDS.peakFactor} or ${100 * BOUNDS.timeShare} % of the travel time no answer is given there.`);
  if (ashoreShare > 0.1) sentences.push(`The stated current carries ${sig(100 * ashoreShare, 2)} % of the paths onto the shore: real water turns along it, so read arrivals near that shore as rough.`);
  return sentences.join(' ');
}
