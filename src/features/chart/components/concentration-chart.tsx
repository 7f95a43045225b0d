import { scaleLinear, scaleLog } from 'd3-scale';
import { area, line } from 'd3-shape';
import { useMemo, useState } from 'react';
import { formatClock, formatConcentration, formatElapsed, formatTimeOfDay, type Measure } from '../../../../shared/format';
import type { EstimateReceptor } from '../../../../shared/schemas/estimate';
import type { ReceptorAnswer } from '../../../../shared/schemas/estimate-result';
import { displayUnitOf, toConcentrationUnit, unitLabel } from '../../../../shared/units';
import { CheckInput } from '../../../components/inputs';
import { useDrawerRoom } from '../hooks/use-drawer-room';
import { useWidth } from '../hooks/use-width';
import { drawnSpan } from '../model/curve';
import { decidingAnswer, earliestS } from '../model/rail-lanes';
import { clockTicks } from '../model/time-ticks';
import { CurveTable } from './curve-table';

const LEFT = 64;
const RIGHT = 16;
const TOP = 22;
const BOTTOM = 40;
const LEAST_HEIGHT = 150;
/** The line that names the receptor above the drawing, px. */
const HEADING = 24;
/** Decades shown on the logarithmic scale. */
const DECADES = 1e4;

type Props = { receptor: EstimateReceptor; answer: ReceptorAnswer; measure: Measure; startMs: number; horizonS: number; offset: string; timeS: number; onTime: (s: number) => void };

/** Concentration against time at one receptor: likely line, low-to-high band, action values, arrival and end. */
export function ConcentrationChart({ receptor, answer, measure, startMs, horizonS, offset, timeS, onTime }: Props) {
  const [ref, width] = useWidth(720);
  const height = useDrawerRoom(HEADING, LEAST_HEIGHT);
  const [isLog, setLog] = useState(false);
  const deciding = decidingAnswer(answer);
  const { series } = answer;
  const [fromS, toS] = useMemo(() => drawnSpan(series, horizonS, deciding?.value ?? null), [series, horizonS, deciding?.value]);
  const top = Math.max(...(series.high ?? series.likely), ...answer.answers.map((one) => one.value)) * 1.08 || 1;
  const unit = displayUnitOf(top, measure);
  const x = scaleLinear([fromS, toS], [LEFT, Math.max(LEFT + 50, width - RIGHT)]);
  const y = isLog ? scaleLog([top / DECADES, top], [height - BOTTOM, TOP]).clamp(true) : scaleLinear([0, top], [height - BOTTOM, TOP]);
  const points = series.timesS.map((t, i) => [t, series.likely[i]!, series.low?.[i] ?? null, series.high?.[i] ?? null] as const).filter(([t]) => t >= fromS && t <= toS);
  const likelyPath = line<(typeof points)[number]>((d) => x(d[0]), (d) => y(d[1]))(points) ?? '';
  const bandPath = series.low && series.high ? (area<(typeof points)[number]>((d) => x(d[0]), (d) => y(d[2] ?? d[1]), (d) => y(d[3] ?? d[1]))(points) ?? '') : '';
  const yTicks = isLog ? y.ticks(4).filter((tick) => Number.isInteger(Math.log10(toConcentrationUnit(tick, unit)) + 1e-9) || Math.abs(Math.log10(toConcentrationUnit(tick, unit)) % 1) < 1e-6) : scaleLinear([0, toConcentrationUnit(top, unit)], [0, 1]).ticks(5);
  const label = `Concentration at ${receptor.code} ${receptor.name} over time. Peak ${text(answer.peak.likely, measure)}${answer.peakS === null ? '' : ` at ${formatClock(startMs + answer.peakS * 1_000, offset)}`}`;

  return (
    <figure className="m-0">
      <div ref={ref} className="w-full">
        <svg width={width} height={height} role="img" aria-label={label} className="block cursor-pointer touch-pan-y" onClick={(event) => onTime(x.invert(event.clientX - event.currentTarget.getBoundingClientRect().left))}>
          {yTicks.map((tick) => {
            const value = isLog ? tick : (tick * top) / toConcentrationUnit(top, unit);
            return (
              <g key={tick} transform={`translate(0 ${y(value)})`}>
                <line x1={LEFT} x2={width - RIGHT} className="stroke-rule" />
                <text x={LEFT - 8} dy="0.32em" textAnchor="end" className="fill-ink2 text-note">
                  {isLog ? Number(toConcentrationUnit(tick, unit).toPrecision(2)) : tick}
                </text>
              </g>
            );
          })}
          <text x={4} y={12} className="fill-ink2 text-note">
            {unitLabel[unit]}
          </text>
          {clockTicks(startMs + fromS * 1_000, toS - fromS, offset, Math.max(2, Math.floor((width - LEFT) / 90))).map((tick) => {
            const s = tick.atS + fromS;
            return (
              <g key={s} transform={`translate(${x(s)} ${height - BOTTOM})`}>
                <line y2={5} className="stroke-ink" />
                <text y={18} textAnchor="middle" className="fill-ink text-note">
                  {tick.isMidnight ? formatClock(startMs + s * 1_000, offset).slice(4) : formatTimeOfDay(startMs + s * 1_000, offset)}
                </text>
                <text y={32} textAnchor="middle" className="fill-ink2 text-note">
                  {formatElapsed(s)}
                </text>
              </g>
            );
          })}
          <line x1={LEFT} x2={width - RIGHT} y1={height - BOTTOM} y2={height - BOTTOM} className="stroke-ink" />
          {bandPath && <path d={bandPath} className="fill-madder-2 opacity-70" />}
          <path d={likelyPath} fill="none" strokeWidth={2} className="stroke-madder-5" />
          {answer.answers.map((one) => (
            <ActionLine key={one.index} x1={LEFT} x2={width - RIGHT} y={y(one.value)} text={`action value ${text(one.value, measure)}`} />
          ))}
          {deciding && <ArrivalMarks x={x} early={earliestS(deciding)} likely={deciding.arrivalS.likely} end={deciding.endS.late ?? deciding.endS.likely} y={y(deciding.value)} />}
          {timeS >= fromS && timeS <= toS && <line x1={x(timeS)} x2={x(timeS)} y1={TOP} y2={height - BOTTOM} strokeWidth={2} className="stroke-kingfisher" />}
        </svg>
      </div>
      <figcaption className="flex flex-wrap items-center gap-x-6 text-note text-ink2 print:block">
        <span>Line: likely. {bandPath ? 'Band: low to high amount. ' : 'No band: the amount has no range. '}Dashed: action value. Open marks on it: earliest arrival and end; filled: likely arrival.</span>
        <CheckInput className="print:hidden" label="Logarithmic scale" checked={isLog} onChange={(event) => setLog(event.target.checked)} />
      </figcaption>
      <CurveTable receptor={receptor} answer={answer} measure={measure} startMs={startMs} offset={offset} />
    </figure>
  );
}

const text = (value: number | null, measure: Measure): string => {
  if (value === null) return 'no estimate';
  const written = formatConcentration(value, measure);
  return `${written.text} ${written.unit}`;
};

function ActionLine({ x1, x2, y, text: words }: { x1: number; x2: number; y: number; text: string }) {
  return (
    <g className="stroke-ink">
      <line x1={x1} x2={x2} y1={y} y2={y} strokeWidth={2} strokeDasharray="8 5" />
      <text x={x2} y={y - 5} textAnchor="end" className="fill-ink text-note font-semibold" stroke="none">
        {words}
      </text>
    </g>
  );
}

function ArrivalMarks({ x, early, likely, end, y }: { x: (s: number) => number; early: number | null; likely: number | null; end: number | null; y: number }) {
  return (
    <g className="stroke-ink" strokeWidth={1.5}>
      {early !== null && <path d={`M${x(early)} ${y}l-5 -9h10z`} className="fill-sheet" />}
      {likely !== null && <path d={`M${x(likely)} ${y}l-5 -9h10z`} className="fill-ink" />}
      {end !== null && <path d={`M${x(end)} ${y}l-5 9h10z`} className="fill-sheet" />}
    </g>
  );
}
