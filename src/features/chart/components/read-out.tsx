import { formatClock, formatElapsed, formatOffset, formatPosition, type Measure } from '../../../../shared/format';
import { snapToReaches } from '../../../../shared/geo';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { EstimateWater } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { readFrameAt } from '../../../map/read-frame';
import { sayConcentration, type Clock } from '../model/arrival-words';
import type { Envelope, Frame } from '../model/forecast';
import { channelWords } from '../model/place';
import { wholeMinutes } from './rail-controls';

type Props = { position: LonLat; frame: Frame; envelope: Envelope | null; water: EstimateWater; ribbonM: number; timeS: number; clock: Clock; measure: Measure; onClose: () => void };

/** What the estimate says at a place that was clicked. */
export function ReadOut({ position, frame, envelope, water, ribbonM, timeS, clock, measure, onClose }: Props) {
  // The grid of a river reaches only as far as the cloud: in the river beside it there is nothing to draw, not nothing known.
  const onRiver = isOnRiver(position, water, ribbonM);
  const read = (one: Frame | Envelope) => readFrameAt(one, position, water, ribbonM) ?? (onRiver ? 0 : null);
  const now = read(frame);
  const largest = envelope ? read(envelope) : null;
  return (
    <section aria-label="Read-out" aria-live="polite" className="absolute top-3 left-3 z-[1000] w-64 rounded-sm bg-sheet p-3 shadow-float print:hidden">
      <div className="flex items-start justify-between gap-2">
        <p className="text-note text-ink2">{placeText(position, water)}</p>
        <Button kind="quiet" icon="close" aria-label="Close the read-out" className="-mt-2 -mr-2" onClick={onClose} />
      </div>
      <p className="text-figure font-semibold">{say(now, measure)}</p>
      <p>
        {formatClock(clock.startMs + wholeMinutes(timeS) * 1_000, clock.offset)} <span className="text-ink2">{formatOffset(clock.offset)} {formatElapsed(timeS)}</span>
      </p>
      {largest !== null && <p className="mt-1 text-ink2">Largest over all time {say(largest, measure)}</p>}
    </section>
  );
}

const say = (value: number | null, measure: Measure): string => (value === null ? 'no estimate here' : value === 0 ? 'below what is drawn' : sayConcentration(value, measure));

function isOnRiver(position: LonLat, water: EstimateWater, ribbonM: number): boolean {
  const snap = water.kind === 'river' ? snapToReaches(position, water.reaches) : null;
  return snap !== null && snap.distanceM <= ribbonM / 2;
}

function placeText(position: LonLat, water: EstimateWater): string {
  const snap = water.kind === 'river' ? snapToReaches(position, water.reaches) : null;
  const reach = water.kind === 'river' ? water.reaches.find((one) => one.id === snap?.reachId) : null;
  return snap && reach && snap.distanceM < 1_000 ? channelWords(reach, snap.chainageKm, snap.bank) : formatPosition(position, 'decimal');
}
