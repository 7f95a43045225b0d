import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { ActionAnswer, ReceptorAnswer } from '../../../../shared/schemas/estimate-result';

/** The action answer that decides for a receptor: the one that may be exceeded first, else the first that may be. */
export function decidingAnswer(answer: ReceptorAnswer): ActionAnswer | null {
  const exceeding = answer.answers.filter((one) => one.verdict === 'may exceed').sort((a, b) => (earliestS(a) ?? Infinity) - (earliestS(b) ?? Infinity));
  return exceeding[0] ?? answer.answers.find((one) => one.verdict === 'cannot be estimated') ?? answer.answers[0] ?? null;
}

export const earliestS = (answer: ActionAnswer): number | null => answer.arrivalS.early ?? answer.arrivalS.likely ?? answer.arrivalS.late;
export const latestEndS = (answer: ActionAnswer): number | null => answer.endS.late ?? answer.endS.likely ?? answer.endS.early;

/** Receptors in the order in which they are reached; those not predicted to be come last, in the document's order. */
export function byArrival(receptors: readonly EstimateReceptor[], answers: readonly ReceptorAnswer[]): { receptor: EstimateReceptor; answer: ReceptorAnswer | null; number: number }[] {
  const byId = new Map(answers.map((answer) => [answer.receptorId, answer] as const));
  const arrivalOf = (receptor: EstimateReceptor): number => {
    const answer = byId.get(receptor.id);
    const deciding = answer ? decidingAnswer(answer) : null;
    if (deciding?.verdict === 'may exceed') return earliestS(deciding) ?? 1e12;
    if (answer?.verdict === 'no action value') return 1e13;
    return answer?.verdict === 'cannot be estimated' ? 1e14 : 1e15;
  };
  return receptors
    .map((receptor, i) => ({ receptor, answer: byId.get(receptor.id) ?? null, at: arrivalOf(receptor), i }))
    .sort((a, b) => a.at - b.at || a.i - b.i)
    .map(({ receptor, answer }, i) => ({ receptor, answer, number: i + 1 }));
}

export type Flag = { id: string; number: number; code: string; earlyS: number; likelyS: number; lateS: number; endS: number; endOpen: boolean; lane: number; isPlateAfter: boolean };

/** Flags on as few lanes as keep them apart. A plate takes `gapS` before its flag, or after it where the rail begins too close. */
export function flagsOf(rows: ReturnType<typeof byArrival>, horizonS: number, gapS: number): Flag[] {
  const laneEnds: number[] = [];
  return rows.flatMap(({ receptor, answer, number }) => {
    const deciding = answer ? decidingAnswer(answer) : null;
    const earlyS = deciding?.verdict === 'may exceed' ? earliestS(deciding) : null;
    if (!deciding || earlyS === null) return [];
    const likelyS = deciding.arrivalS.likely ?? earlyS;
    const endS = Math.min(horizonS, latestEndS(deciding) ?? horizonS);
    const isPlateAfter = earlyS < gapS;
    const free = laneEnds.findIndex((end) => end + (isPlateAfter ? 0 : gapS) <= earlyS);
    const lane = free === -1 ? laneEnds.length : free;
    laneEnds[lane] = endS + (isPlateAfter ? gapS : 0);
    return [{ id: receptor.id, number, code: receptor.code || receptor.name, earlyS, likelyS, lateS: deciding.arrivalS.late ?? likelyS, endS, endOpen: deciding.endOpen, lane, isPlateAfter }];
  });
}
