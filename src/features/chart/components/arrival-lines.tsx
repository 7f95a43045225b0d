import { useCallback } from 'react';
import { formatClock, formatElapsed, formatTimeOfDay } from '../../../../shared/format';
import type { EstimateWater } from '../../../../shared/schemas/estimate';
import type { Reached } from '../../../../shared/schemas/estimate-result';
import { IsochroneLayer } from '../../../map/isochrone-layer';
import type { MapTheme } from '../../../map/palette';
import type { Clock } from '../model/arrival-words';

const DAY_S = 86_400;

/** Lines of first arrival with clock times; with elapsed times while the start is not known. */
export function ArrivalLines({ reached, water, theme, clock }: { reached: Reached; water: EstimateWater; theme: MapTheme; clock: Clock }) {
  const { startMs, offset } = clock;
  const isWithinDay = (reached.isochrones.at(-1)?.timeS ?? 0) < DAY_S;
  const labelOf = useCallback(
    (timeS: number) => (Number.isNaN(startMs) ? formatElapsed(timeS) : isWithinDay ? formatTimeOfDay(startMs + timeS * 1_000, offset) : formatClock(startMs + timeS * 1_000, offset)),
    [startMs, offset, isWithinDay],
  );
  return <IsochroneLayer reached={reached} water={water} theme={theme} labelOf={labelOf} />;
}
