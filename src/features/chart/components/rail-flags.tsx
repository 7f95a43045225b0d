import { classNames } from '../../../lib/class-names';
import type { Flag } from '../model/rail-lanes';

type Props = { flags: Flag[]; xOf: (s: number) => number; top: number; lanePx: number; selectedId: string | null; onSelect: (id: string) => void };

/**
 * One flag a receptor: the open bar runs from the earliest to the latest arrival, the mark is the likely one,
 * the thin line runs on to the end and is dashed where the end is beyond the estimate.
 */
export function RailFlags({ flags, xOf, top, lanePx, selectedId, onSelect }: Props) {
  return (
    <div className="pointer-events-none absolute inset-0">
      <svg width="100%" height="100%" aria-hidden="true" className="absolute inset-0">
        {flags.map((flag) => {
          const y = top + flag.lane * lanePx + lanePx / 2;
          const early = xOf(flag.earlyS);
          const late = Math.max(early + 3, xOf(flag.lateS));
          return (
            <g key={flag.id} className="stroke-ink">
              <line x1={early} x2={xOf(flag.endS)} y1={y} y2={y} strokeWidth={flag.id === selectedId ? 3 : 1.5} strokeDasharray={flag.endOpen ? '4 3' : undefined} />
              <rect x={early} y={y - 4} width={late - early} height={8} className="fill-sheet" />
              <line x1={xOf(flag.likelyS)} x2={xOf(flag.likelyS)} y1={y - 6} y2={y + 6} strokeWidth={2} />
              {!flag.endOpen && <line x1={xOf(flag.endS)} x2={xOf(flag.endS)} y1={y - 5} y2={y + 5} strokeWidth={1.5} />}
            </g>
          );
        })}
      </svg>
      {flags.map((flag) => (
        <RailPlate key={flag.id} flag={flag} x={flag.isPlateAfter ? xOf(Math.max(flag.endS, flag.lateS)) : xOf(flag.earlyS)} y={top + flag.lane * lanePx} height={lanePx} isSelected={flag.id === selectedId} onSelect={onSelect} />
      ))}
    </div>
  );
}

/** The plate stands before the bar, or after it where there is no room on the left. */
function RailPlate({ flag, x, y, height, isSelected, onSelect }: { flag: Flag; x: number; y: number; height: number; isSelected: boolean; onSelect: (id: string) => void }) {
  const width = 12 + flag.code.length * 7;
  return (
    <button
      type="button"
      aria-label={`${flag.code}: show its curve`}
      aria-pressed={isSelected}
      className={classNames('pointer-events-auto absolute flex items-center justify-end px-1 text-[12px] leading-none font-semibold whitespace-nowrap', isSelected ? 'text-kingfisher underline' : 'text-ink')}
      style={{ left: flag.isPlateAfter ? x + 4 : x - width, top: y, height, width }}
      onClick={() => onSelect(flag.id)}
    >
      {flag.code}
    </button>
  );
}
