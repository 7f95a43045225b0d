import { useMemo, type KeyboardEvent, type PointerEvent } from 'react';
import { formatClock, formatDay, formatElapsed, formatTimeOfDay } from '../../../../shared/format';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { Player } from '../hooks/use-player';
import { useWidth } from '../hooks/use-width';
import { flagsOf } from '../model/rail-lanes';
import { nightSpans } from '../model/sun';
import { clockTicks } from '../model/time-ticks';
import { RailControls, wholeMinutes } from './rail-controls';
import { RailFlags } from './rail-flags';
import type { Rows } from './receptors-panel';

const SIDE_PX = 14;
/** Tall enough for a plate to be pressed: 24 px is the least target (WCAG 2.2, 2.5.8). */
const LANE_PX = 24;
const SCALE_PX = 38;
const NARROWEST_TICK_PX = 74;
const PLATE_PX = 56;

type Props = {
  player: Player;
  startMs: number;
  horizonS: number;
  offset: string;
  place: LonLat | null;
  rows: Rows;
  selectedId: string | null;
  onSelect: (receptorId: string) => void;
  /** How far the forecast is solved, as a share; null when all is there. */
  solvedShare: number | null;
  note: string;
};

/** Time under the map: night shaded, clock and elapsed time, a flag for each arrival, play and step. */
export function TimeRail({ player, startMs, horizonS, offset, place, rows, selectedId, onSelect, solvedShare, note }: Props) {
  const [ref, width] = useWidth(900);
  const track = Math.max(10, width - 2 * SIDE_PX);
  const xOf = (s: number) => SIDE_PX + (Math.min(horizonS, Math.max(0, s)) / horizonS) * track;
  const nights = useMemo(() => (place ? nightSpans(startMs, horizonS, place[0], place[1]) : []), [startMs, horizonS, place]);
  const flags = useMemo(() => flagsOf(rows, horizonS, (PLATE_PX / track) * horizonS), [rows, horizonS, track]);
  const ticks = clockTicks(startMs, horizonS, offset, Math.max(2, Math.floor(track / NARROWEST_TICK_PX)));
  const lanes = Math.min(5, Math.max(1, ...flags.map((flag) => flag.lane + 1)));
  const laneTop = 6;
  const axisY = laneTop + lanes * LANE_PX + 4;
  const height = axisY + SCALE_PX;

  const goToPointer = (event: PointerEvent<HTMLDivElement>) => {
    const box = event.currentTarget.getBoundingClientRect();
    player.goTo(((event.clientX - box.left - SIDE_PX) / track) * horizonS);
  };
  const spoken = `${formatClock(startMs + wholeMinutes(player.timeS) * 1_000, offset)}, ${formatElapsed(player.timeS)}`;

  return (
    <section aria-label="Time" className="border-t border-rule bg-sheet print:break-inside-avoid">
      <RailControls player={player} startMs={startMs} offset={offset} note={note} />
      <div ref={ref} className="relative">
        <div
          role="slider"
          tabIndex={0}
          aria-label="Time shown on the map"
          aria-valuemin={0}
          aria-valuemax={Math.round(horizonS / 60)}
          aria-valuenow={Math.round(player.timeS / 60)}
          aria-valuetext={spoken}
          className="relative cursor-pointer touch-none select-none"
          onKeyDown={(event) => railKey(event, player, horizonS)}
          onPointerDown={(event) => {
            event.currentTarget.setPointerCapture(event.pointerId);
            player.pause();
            goToPointer(event);
          }}
          onPointerMove={(event) => {
            if (event.currentTarget.hasPointerCapture(event.pointerId)) goToPointer(event);
          }}
        >
          <svg width={width} height={height} aria-hidden="true" className="block">
            {nights.map((night) => (
              <rect key={night.fromS} x={xOf(night.fromS)} y={0} width={xOf(night.toS) - xOf(night.fromS)} height={axisY} className="fill-ink opacity-[0.09]" />
            ))}
            {solvedShare !== null && <rect x={xOf(horizonS * solvedShare)} y={0} width={xOf(horizonS) - xOf(horizonS * solvedShare)} height={axisY} className="fill-rule opacity-50" />}
            <line x1={SIDE_PX} x2={SIDE_PX + track} y1={axisY} y2={axisY} className="stroke-ink" />
            {ticks.map((tick) => (
              <RailTick key={tick.atS} x={xOf(tick.atS)} anchor={xOf(tick.atS) > width - 34 ? 'end' : xOf(tick.atS) < 34 ? 'start' : 'middle'} axisY={axisY} day={tick.isMidnight || tick === ticks[0] ? formatDay(startMs + tick.atS * 1_000, offset) : ''} time={formatTimeOfDay(startMs + tick.atS * 1_000, offset)} elapsed={formatElapsed(tick.atS)} />
            ))}
            <g transform={`translate(${xOf(player.timeS)} 0)`}>
              <line y1={0} y2={axisY} className="stroke-kingfisher" strokeWidth={2} />
              <path d={`M-7 ${axisY + 9}L0 ${axisY}L7 ${axisY + 9}Z`} className="fill-kingfisher" />
            </g>
          </svg>
        </div>
        <RailFlags flags={flags.filter((flag) => flag.lane < lanes)} xOf={xOf} top={laneTop} lanePx={LANE_PX} selectedId={selectedId} onSelect={onSelect} />
      </div>
    </section>
  );
}

function RailTick({ x, anchor, axisY, day, time, elapsed }: { x: number; anchor: 'start' | 'middle' | 'end'; axisY: number; day: string; time: string; elapsed: string }) {
  return (
    <g transform={`translate(${x} ${axisY})`}>
      <line y2={day ? 8 : 5} className="stroke-ink" />
      <text y={19} textAnchor={anchor} className={`fill-ink text-note ${day ? 'font-semibold' : ''}`}>
        {day ? day : time}
      </text>
      <text y={32} textAnchor={anchor} className="fill-ink2 text-note">
        {day && time !== '00:00' ? time : elapsed}
      </text>
    </g>
  );
}

function railKey(event: KeyboardEvent, player: Player, horizonS: number): void {
  const acts: Record<string, () => void> = {
    ArrowRight: () => player.step(1),
    ArrowUp: () => player.step(1),
    ArrowLeft: () => player.step(-1),
    ArrowDown: () => player.step(-1),
    PageUp: () => player.goTo(player.timeS + 3_600),
    PageDown: () => player.goTo(player.timeS - 3_600),
    Home: () => player.goTo(0),
    End: () => player.goTo(horizonS),
    ' ': () => player.toggle(),
  };
  const act = acts[event.key];
  if (!act || event.target !== event.currentTarget) return;
  event.preventDefault();
  act();
}
