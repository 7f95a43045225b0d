import { arrivalClock } from '../../../shared/clock-time';
import type { EstimateDocument } from '../../../shared/schemas/estimate';
import type { ActionAnswer, EstimateResult } from '../../../shared/schemas/estimate-result';
import type { NextArrival } from '../../../shared/schemas/incidents';

/** What the Watch needs of a finished run; never changes, so it is reckoned once a run. */
export type RunArrivals = { runId: string; scenarioId: string; startMs: number; arrivals: Arrival[] };
type Arrival = {
  receptorCode: string;
  receptorName: string;
  verdict: string;
  earlyS: number;
  likelyS: number | null;
  /** Null while the estimate ends before the concentration is below the action value again. */
  endS: number | null;
  closingS: number | null;
};

export function arrivalsOf(runId: string, scenarioId: string, document: EstimateDocument, result: EstimateResult): RunArrivals {
  const receptors = new Map(document.receptors.map((receptor) => [receptor.id, receptor]));
  const arrivals = result.receptors.flatMap((answer): Arrival[] => {
    const receptor = receptors.get(answer.receptorId);
    const first = firstExceedance(answer.answers);
    if (!receptor || !first) return [];
    return [{ receptorCode: receptor.code, receptorName: receptor.name, verdict: answer.verdict, ...first, closingS: receptor.closingS }];
  });
  return { runId, scenarioId, startMs: Date.parse(document.startAt), arrivals };
}

/** The earliest arrival over all action values of a receptor, and the latest end. */
function firstExceedance(answers: readonly ActionAnswer[]): Pick<Arrival, 'earlyS' | 'likelyS' | 'endS'> | null {
  const reached = answers.flatMap((answer) => {
    const { early, likely, late } = answer.arrivalS;
    const earlyS = early ?? likely ?? late;
    if (earlyS === null) return [];
    const ends = [answer.endS.early, answer.endS.likely, answer.endS.late].filter((end) => end !== null);
    return [{ earlyS, likelyS: likely, endS: answer.endOpen || ends.length === 0 ? null : Math.max(...ends) }];
  });
  if (reached.length === 0) return null;
  const first = reached.reduce((a, b) => (b.earlyS < a.earlyS ? b : a));
  return { ...first, endS: reached.some(({ endS }) => endS === null) ? null : Math.max(...reached.map(({ endS }) => endS!)) };
}

/**
 * Arrivals to come or still lasting, the earliest first. One whose end has passed drops out; one that is above
 * its action value when the estimate ends stays, since the estimate does not know when it ends.
 */
export function nextArrivals(incidentId: string, utcOffset: string, runs: readonly (RunArrivals & { scenarioName: string })[], nowMs: number): NextArrival[] {
  return runs
    .flatMap(({ runId, scenarioId, scenarioName, startMs, arrivals }) =>
      arrivals
        .filter(({ endS }) => endS === null || startMs + endS * 1_000 >= nowMs)
        .map((arrival) => ({
          at: startMs + arrival.earlyS * 1_000,
          next: {
            incidentId,
            scenarioId,
            scenarioName,
            runId,
            receptorCode: arrival.receptorCode,
            receptorName: arrival.receptorName,
            verdict: arrival.verdict,
            earliestAt: arrivalClock(startMs, arrival.earlyS, utcOffset),
            likelyAt: arrival.likelyS === null ? null : arrivalClock(startMs, arrival.likelyS, utcOffset),
            closeByAt: arrival.closingS === null ? null : arrivalClock(startMs, arrival.earlyS - arrival.closingS, utcOffset),
          },
        })),
    )
    .sort((a, b) => a.at - b.at)
    .map(({ next }) => next);
}
