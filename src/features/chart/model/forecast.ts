import type { EnvelopeHead, FrameHead } from '../../../../shared/frames';
import type { Check, EstimateResult, Level, ReceptorAnswer } from '../../../../shared/schemas/estimate-result';
import type { FieldError } from '../../../../shared/problem';
import type { EstimateMessage } from '../../../lib/estimate-stream';

export type Frame = { head: FrameHead; codes: Uint16Array };
export type Envelope = { head: EnvelopeHead; codes: Uint16Array };

/** What has arrived of an estimate so far. Each message gives a new object; frames are kept by index. */
export type Forecast = {
  unit: 'kg/m3' | 'counts/m3';
  levels: Level[];
  frameTimesS: number[];
  frames: (Frame | undefined)[];
  envelope: Envelope | null;
  answers: ReceptorAnswer[];
  result: EstimateResult | null;
  progress: { stage: string; done: number; of: number } | null;
  failed: { title: string; detail: string; errors: FieldError[] } | null;
};

export const emptyForecast: Forecast = { unit: 'kg/m3', levels: [], frameTimesS: [], frames: [], envelope: null, answers: [], result: null, progress: null, failed: null };

export function withMessage(forecast: Forecast, message: EstimateMessage): Forecast {
  switch (message.type) {
    case 'start':
      return { ...emptyForecast, unit: message.unit, levels: message.levels, frameTimesS: message.frameTimesS };
    case 'progress':
      return { ...forecast, progress: { stage: message.stage, done: message.done, of: message.of } };
    case 'receptor':
      return { ...forecast, answers: [...forecast.answers.filter((answer) => answer.receptorId !== message.answer.receptorId), message.answer] };
    case 'frame': {
      const frames = forecast.frames.slice();
      frames[message.frame.head.index] = message.frame;
      return { ...forecast, frames };
    }
    case 'envelope':
      return { ...forecast, envelope: message.frame };
    case 'result':
      return { ...forecast, result: message.result, answers: message.result.receptors, levels: message.result.levels, frameTimesS: message.result.frameTimesS, progress: null };
    case 'failed':
      return { ...forecast, progress: null, failed: { title: message.title, detail: message.detail, errors: message.errors } };
  }
}

/** Index of the frame to show at a time: the last one not after it that has arrived, else the first that has. */
export function frameIndexAt(forecast: Forecast, timeS: number): number | null {
  let found: number | null = null;
  forecast.frameTimesS.forEach((at, i) => {
    if (at <= timeS + 0.5 && forecast.frames[i]) found = i;
  });
  if (found !== null) return found;
  const first = forecast.frames.findIndex((frame) => frame !== undefined);
  return first === -1 ? null : first;
}

export const readableChecks = (checks: readonly Check[]): Check[] => {
  const rank = { stop: 0, warn: 1, note: 2 } as const;
  return [...checks].sort((a, b) => rank[a.severity] - rank[b.severity]);
};
