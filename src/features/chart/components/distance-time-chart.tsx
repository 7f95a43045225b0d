import { ticks } from 'd3-array';
import { scaleLinear } from 'd3-scale';
import { useMemo } from 'react';
import { formatClock, formatConcentration, formatElapsed, formatTimeOfDay, type Measure } from '../../../../shared/format';
import type { EstimateReceptor, EstimateWater } from '../../../../shared/schemas/estimate';
import type { Level } from '../../../../shared/schemas/estimate-result';
import { bandColours } from '../../../map/palette';
import { useDrawerRoom } from '../hooks/use-drawer-room';
import { useWidth } from '../hooks/use-width';
import { distancePaths, travelledKm, valueBetween, type DistanceTime } from '../model/distance-contours';
import { clockTicks } from '../model/time-ticks';

const LEFT = 74;
const RIGHT = 60;
const TOP = 10;
const BOTTOM = 40;
const LEAST_HEIGHT = 176;

type Props = {
  field: DistanceTime;
  levels: readonly Level[];
  water: EstimateWater;
  receptors: readonly EstimateReceptor[];
  measure: Measure;
  startMs: number;
  horizonS: number;
  offset: string;
  timeS: number;
  theme: 'day' | 'night';
  onTime: (s: number) => void;
};

/** Section-mean concentration by time and place along the river, receptors as lines across. */
export function DistanceTimeChart({ field, levels, water, receptors, measure, startMs, horizonS, offset, timeS, theme, onTime }: Props) {
  const [ref, width] = useWidth(720);
  const height = useDrawerRoom(0, LEAST_HEIGHT);
  const km = useMemo(() => travelledKm(field), [field]);
  const drawn = useMemo(() => [...levels].filter((level) => level.value > 0).sort((a, b) => a.value - b.value), [levels]);
  const x = useMemo(() => scaleLinear([0, horizonS], [LEFT, Math.max(LEFT + 50, width - RIGHT)]), [horizonS, width]);
  const y = useMemo(() => scaleLinear([0, km[km.length - 1] ?? 1], [TOP, height - BOTTOM]), [km, height]);
  const paths = useMemo(() => distancePaths(field, drawn.map((level) => level.value), x, (column) => y(valueBetween(km, column))), [field, drawn, x, y, km]);
  const colours = bandColours(drawn.length, theme);
  const prefix = water.kind === 'river' ? (water.reaches.find((reach) => reach.id === field.reachIds[0])?.chainagePrefix ?? 'km') : 'km';
  const lines = spaced(receptors.flatMap((receptor) => {
    const column = receptor.channel ? columnOf(field, receptor.channel) : null;
    return column === null ? [] : [{ receptor, at: y(valueBetween(km, column)) }];
  }));

  return (
    <figure className="m-0">
      <div ref={ref} className="w-full">
        <svg
          width={width}
          height={height}
          role="img"
          aria-label={`Concentration along ${water.name} over time, mean over the section. Receptors: ${lines.map((one) => one.receptor.code).join(', ') || 'none on this path'}`}
          className="block cursor-pointer"
          onClick={(event) => onTime(x.invert(event.clientX - event.currentTarget.getBoundingClientRect().left))}
        >
          {paths.map((path, i) => (
            <path key={drawn[i]!.value} d={path} fillRule="evenodd" fill={colours[i]} fillOpacity={0.85} strokeWidth={drawn[i]!.isActionValue ? 2 : 0.75} strokeDasharray={drawn[i]!.isActionValue ? '7 4' : undefined} className="stroke-ink" />
          ))}
          {chainageTicks(field, km, y, Math.max(3, Math.floor(height / 34))).map((tick) => (
            <g key={tick.chainageKm} transform={`translate(${LEFT} ${y(tick.travelledKm)})`}>
              <line x2={-5} className="stroke-ink" />
              <text x={-9} dy="0.32em" textAnchor="end" className="fill-ink2 text-note">
                {prefix} {Number(tick.chainageKm.toFixed(1))}
              </text>
            </g>
          ))}
          {lines.map(({ receptor, at, labelY }) => (
            <g key={receptor.id}>
              <line x1={LEFT} x2={width - RIGHT} y1={at} y2={at} className="stroke-ink" strokeWidth={1} />
              <text x={width - RIGHT + 5} y={labelY} dy="0.32em" className="fill-ink text-note font-semibold">
                {receptor.code}
              </text>
            </g>
          ))}
          {clockTicks(startMs, horizonS, offset, Math.max(2, Math.floor((width - LEFT - RIGHT) / 84))).map((tick) => (
            <g key={tick.atS} transform={`translate(${x(tick.atS)} ${height - BOTTOM})`}>
              <line y2={5} className="stroke-ink" />
              <text y={18} textAnchor="middle" className="fill-ink text-note">
                {tick.isMidnight ? formatClock(startMs + tick.atS * 1_000, offset).slice(4, -6) : formatTimeOfDay(startMs + tick.atS * 1_000, offset)}
              </text>
              <text y={32} textAnchor="middle" className="fill-ink2 text-note">
                {formatElapsed(tick.atS)}
              </text>
            </g>
          ))}
          <path d={`M${LEFT} ${TOP}V${height - BOTTOM}H${width - RIGHT}`} fill="none" className="stroke-ink" />
          <line x1={x(timeS)} x2={x(timeS)} y1={TOP} y2={height - BOTTOM} strokeWidth={2} className="stroke-kingfisher" />
        </svg>
      </div>
      <figcaption className="text-note text-ink2">
        Mean over the section, release at the top, water runs downwards. Bands from {drawn.map((level) => `${formatConcentration(level.value, measure).text} ${formatConcentration(level.value, measure).unit}`).join(', ')}; dashed edges are action values.
      </figcaption>
    </figure>
  );
}

const LABEL_PX = 14;

/** Codes stand beside their lines, or a little lower where two lines are closer than a line of text. */
function spaced<Line extends { at: number }>(lines: readonly Line[]): (Line & { labelY: number })[] {
  let last = -Infinity;
  return lines.toSorted((a, b) => a.at - b.at).map((line) => {
    last = Math.max(line.at, last + LABEL_PX);
    return { ...line, labelY: last };
  });
}

/** Column of a place in the field, between two of its columns; null when the path does not pass it. */
function columnOf(field: DistanceTime, place: { reachId: string; chainageKm: number }): number | null {
  for (let i = 1; i < field.chainageKm.length; i++) {
    if (field.reachIds[i] !== place.reachId && field.reachIds[i - 1] !== place.reachId) continue;
    const a = field.chainageKm[i - 1]!;
    const b = field.chainageKm[i]!;
    if (place.chainageKm <= a && place.chainageKm >= b && a !== b) return i - 1 + (a - place.chainageKm) / (a - b);
  }
  return null;
}

type Tick = { chainageKm: number; travelledKm: number };

/** Round chainages down one river; where the path changes river, round distances with the chainage there. */
function chainageTicks(field: DistanceTime, km: readonly number[], y: { ticks: (count: number) => number[] }, count: number): Tick[] {
  const { chainageKm } = field;
  const [first = 0, last = 0] = [chainageKm[0], chainageKm[chainageKm.length - 1]];
  if (chainageKm.some((value, i) => i > 0 && value > chainageKm[i - 1]!)) return y.ticks(count).map((travelledKm) => ({ travelledKm, chainageKm: along(km, chainageKm, travelledKm) }));
  const falling = [...chainageKm].reverse();
  const travelled = [...km].reverse();
  return ticks(last, first, count).map((chainage) => ({ chainageKm: chainage, travelledKm: along(falling, travelled, chainage) }));
}

/** The value in `to` at the place where the rising list `from` reaches a value. */
function along(from: readonly number[], to: readonly number[], value: number): number {
  const next = from.findIndex((one) => one >= value);
  const i = next === -1 ? from.length - 1 : Math.max(1, next);
  const [a, b] = [from[i - 1]!, from[i] ?? from[i - 1]!];
  const share = b === a ? 0 : (value - a) / (b - a);
  return to[i - 1]! + ((to[i] ?? to[i - 1]!) - to[i - 1]!) * share;
}
