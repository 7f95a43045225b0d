import { formatConcentration } from '../../shared/format';
import type { Level } from '../../shared/schemas/estimate-result';
import { unitLabel, type ConcentrationUnit } from '../../shared/units';
import { drawnLevels } from './frame';
import { BAND_OPACITY, bandColours, type MapTheme } from './palette';

const ROW_PX = 16;
const STAFF_LEFT = 1;
const STAFF_PX = 22;
const TOP_PX = 3;
/** Room under the staff: half a figure, and the line that says what the dashes mean. */
const FOOT_PX = 9;
const KEY_PX = 20;

type Props = { levels: readonly Level[]; unit?: ConcentrationUnit; measure: 'mass' | 'count'; theme: MapTheme; ramp?: readonly string[] };

/** The legend as a staff gauge: bands from the lowest up, the value printed at each edge, action values heavy and dashed as on the map. */
export function ConcentrationGauge({ levels, unit, measure, theme, ramp }: Props) {
  const drawn = drawnLevels(levels);
  const colours = bandColours(drawn.length, theme, ramp);
  const hasAction = drawn.some((level) => level.isActionValue);
  const staffEnd = TOP_PX + drawn.length * ROW_PX;
  const height = staffEnd + FOOT_PX + (hasAction ? KEY_PX : 0);
  const edgeY = (k: number) => TOP_PX + (drawn.length - k) * ROW_PX;
  const figure = (level: Level) => {
    const written = formatConcentration(level.value, measure, unit ? { unit } : {});
    return unit ? written.text : `${written.text} ${written.unit}`;
  };
  const words = drawn.map((level) => `${figure(level)}${level.isActionValue ? ' (action value)' : ''}`);
  // About 7.2 px a character at this size; "action value" takes 74 px.
  const longest = Math.max(hasAction ? 74 : 0, ...drawn.map((level) => figure(level).length * 7.2));
  const right = STAFF_LEFT + STAFF_PX + 10;
  return (
    <svg className="gauge" width={right + longest} height={height} role="img" aria-label={`Concentration in ${unit ? unitLabel[unit] : 'printed units'}, bands from ${words.join(', ')} upwards`}>
      {drawn.map((level, k) => (
        <g key={level.value}>
          <rect x={STAFF_LEFT} y={edgeY(k + 1)} width={STAFF_PX} height={ROW_PX} fill={colours[k]} fillOpacity={BAND_OPACITY + 0.15} />
          {[1, 2].map((tick) => (
            <path key={tick} className="gauge-tick" d={`M${STAFF_LEFT + STAFF_PX} ${edgeY(k) - (tick * ROW_PX) / 3}h-4`} />
          ))}
        </g>
      ))}
      <rect className="gauge-staff" x={STAFF_LEFT} y={TOP_PX} width={STAFF_PX} height={drawn.length * ROW_PX} />
      {drawn.map((level, k) => (
        <g key={level.value}>
          <path className={level.isActionValue ? 'gauge-action-tick' : 'gauge-tick'} d={`M${STAFF_LEFT} ${edgeY(k)}H${right - 4}`} />
          <text className={level.isActionValue ? 'gauge-action' : undefined} x={right} y={edgeY(k) + 4}>
            {figure(level)}
          </text>
        </g>
      ))}
      {hasAction && (
        <g>
          <path className="gauge-action-tick" d={`M${STAFF_LEFT} ${staffEnd + FOOT_PX + 9}h${STAFF_PX + 6}`} />
          <text x={right} y={staffEnd + FOOT_PX + 13}>
            action value
          </text>
        </g>
      )}
    </svg>
  );
}
