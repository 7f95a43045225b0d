import { formatConcentration } from '../../shared/format';
import type { Level } from '../../shared/schemas/estimate-result';
import { unitLabel, type ConcentrationUnit } from '../../shared/units';
import { drawnLevels } from './frame';
import { BAND_OPACITY, bandColours, type MapTheme } from './palette';

const ROW_PX = 30;
const STAFF_LEFT = 1;
const STAFF_PX = 30;
const TOP_PX = 12;

type Props = { levels: readonly Level[]; unit?: ConcentrationUnit; measure: 'mass' | 'count'; theme: MapTheme; ramp?: readonly string[] };

/** The legend as a staff gauge: bands from the lowest up, the value printed at each edge, action values marked with their words. */
export function ConcentrationGauge({ levels, unit, measure, theme, ramp }: Props) {
  const drawn = drawnLevels(levels);
  const colours = bandColours(drawn.length, theme, ramp);
  const height = TOP_PX + drawn.length * ROW_PX + 14;
  const edgeY = (k: number) => TOP_PX + (drawn.length - k) * ROW_PX;
  const figure = (level: Level) => {
    const written = formatConcentration(level.value, measure, unit ? { unit } : {});
    return unit ? written.text : `${written.text} ${written.unit}`;
  };
  const words = drawn.map((level) => `${figure(level)}${level.isActionValue ? ' (action value)' : ''}`);
  // About 7.2 px a character at this size; the words beside an action value take 90 px.
  const longest = Math.max(0, ...drawn.map((level) => figure(level).length * 7.2 + (level.isActionValue ? 90 : 0)));
  const right = STAFF_LEFT + STAFF_PX + 10;
  return (
    <svg className="gauge" width={right + longest} height={height} role="img" aria-label={`Concentration in ${unit ? unitLabel[unit] : 'printed units'}, bands from ${words.join(', ')} upwards`}>
      {drawn.map((level, k) => (
        <g key={level.value}>
          <rect x={STAFF_LEFT} y={edgeY(k + 1)} width={STAFF_PX} height={ROW_PX} fill={colours[k]} fillOpacity={BAND_OPACITY + 0.15} />
          {[1, 2, 3, 4].map((tick) => (
            <path key={tick} className="gauge-tick" d={`M${STAFF_LEFT + STAFF_PX} ${edgeY(k) - (tick * ROW_PX) / 5}h${tick % 2 === 0 ? -8 : -5}`} />
          ))}
        </g>
      ))}
      <rect className="gauge-staff" x={STAFF_LEFT} y={TOP_PX} width={STAFF_PX} height={drawn.length * ROW_PX} />
      {drawn.map((level, k) => (
        <g key={level.value}>
          <path className={level.isActionValue ? 'gauge-action-tick' : 'gauge-tick'} d={`M${STAFF_LEFT} ${edgeY(k)}H${right - 4}`} />
          <text className={level.isActionValue ? 'gauge-action' : undefined} x={right} y={edgeY(k) + 4}>
            {figure(level)}
            {level.isActionValue && (
              <tspan className="gauge-note" fontWeight="400" dx="6">
                action value
              </tspan>
            )}
          </text>
        </g>
      ))}
    </svg>
  );
}
