import type { Loss } from '../../shared/schemas/estimate';

/** Exposure to loss, the integral of the rate since T0; survival between two times is exp(-(difference)). */
export type LossClock = {
  readonly kind: Loss['kind'];
  /** Integral of the loss rate from T0 to t, t may be negative. */
  exposure(tS: number): number;
  /** The rate where it is constant, 1/s; null where it switches. */
  readonly constantRatePerS: number | null;
  /** Times at which the rate jumps, within the given span. */
  switches(fromS: number, toS: number): number[];
};

const DAY_S = 86_400;

/** First-order loss: exp(-k t); with day and night rates, the exact integral of the switching rate. */
export function lossClock(loss: Loss, startAt: string): LossClock {
  if (loss.kind !== 'day-night') {
    const rate = loss.kind === 'none' ? 0 : loss.ratePerS;
    return { kind: loss.kind, exposure: (tS) => rate * tS, constantRatePerS: rate, switches: () => [] };
  }
  const { dayRatePerS, nightRatePerS, sunriseHour, sunsetHour } = loss;
  const dayHours = sunsetHour >= sunriseHour ? sunsetHour - sunriseHour : 24 - sunriseHour + sunsetHour;
  const perDay = (dayRatePerS - nightRatePerS) * dayHours * 3_600 + nightRatePerS * DAY_S;
  /** Seconds since sunrise at T0. */
  const offset = localSeconds(startAt) - sunriseHour * 3_600;
  const cumulative = (sinceSunriseS: number): number => {
    const days = Math.floor(sinceSunriseS / DAY_S);
    const within = sinceSunriseS - days * DAY_S;
    const light = Math.min(within, dayHours * 3_600);
    return days * perDay + light * dayRatePerS + (within - light) * nightRatePerS;
  };
  const atStart = cumulative(offset);
  return {
    kind: 'day-night',
    exposure: (tS) => cumulative(tS + offset) - atStart,
    constantRatePerS: dayRatePerS === nightRatePerS ? dayRatePerS : null,
    switches(fromS, toS) {
      const out: number[] = [];
      for (let day = Math.floor((fromS + offset) / DAY_S); day * DAY_S - offset <= toS; day++)
        for (const t of [day * DAY_S - offset, day * DAY_S + dayHours * 3_600 - offset]) if (t > fromS && t < toS) out.push(t);
      return out;
    },
  };
}

/** Seconds after local midnight of an instant written with its UTC offset. */
export function localSeconds(instant: string): number {
  const match = /T(\d{2}):(\d{2})(?::(\d{2}(?:\.\d+)?))?/.exec(instant);
  return match ? Number(match[1]) * 3_600 + Number(match[2]) * 60 + Number(match[3] ?? 0) : 0;
}
