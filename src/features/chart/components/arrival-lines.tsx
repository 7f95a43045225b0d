import { useCallback } from 'react';
import { formatClock, formatDay, formatElapsed, formatTimeOfDay } from '../../../../shared/format';
import type { EstimateWater } from '../../../../shared/schemas/estimate';
import type { Reached } from '../../../../shared/schemas/estimate-result';
import { IsochroneLayer } from '../../../map/isochrone-layer';
import type { MapTheme } from '../../../map/palette';
import type { Clock } from '../model/arrival-words';

const DAY_S = 86_400;

/** Time of day, with the day of the week where the lines span more than a day, and the date where they span more than five. */
function writeTime(ms: number, offset: string, spanS: number): string {
  const time = formatTimeOfDay(ms, offset);
  if (spanS < DAY_S) return time;
  return spanS < 5 * DAY_S ? `${formatDay(ms, offset).split(' ')[0]} ${time}` : formatClock(ms, offset);
}

/** Lines of first arrival with clock times; with elapsed times while the start is not known. */
export function ArrivalLines({ reached, water, theme, clock }: { reached: Reached; water: EstimateWater; theme: MapTheme; clock: Clock }) {
  const { startMs, offset } = clock;
  const spanS = reached.isochrones.at(-1)?.timeS ?? 0;
  const labelOf = useCallback((timeS: number) => (Number.isNaN(startMs) ? formatElapsed(timeS) : writeTime(startMs + timeS * 1_000, offset, spanS)), [startMs, offset, spanS]);
  return <IsochroneLayer reached={reached} water={water} theme={theme} labelOf={labelOf} />;
}
