import { formatClock, formatElapsed, formatOffset } from '../../../../shared/format';
import { Button } from '../../../components/button';
import { speeds, type Player } from '../hooks/use-player';

/** Play, step, speed, and the time shown in large figures. */
export function RailControls({ player, startMs, offset, note }: { player: Player; startMs: number; offset: string; note: string }) {
  const shownS = wholeMinutes(player.timeS);
  return (
    <div className="flex items-center gap-x-3 gap-y-1 px-3 pt-1.5 pb-1">
      <div className="flex gap-1 print:hidden">
        <Button kind="quiet" onClick={() => player.step(-1)} aria-label="One step back" icon="back" />
        <Button kind="plain" onClick={player.toggle} aria-label={player.isPlaying ? 'Pause' : 'Play'} icon={player.isPlaying ? 'pause' : 'play'} />
        <Button kind="quiet" onClick={() => player.step(1)} aria-label="One step forward" icon="forward" />
      </div>
      <div className="flex min-w-0 flex-wrap items-baseline gap-x-3">
        <output aria-live="off" className="text-lead font-semibold whitespace-nowrap max-sm:text-body">
          {formatClock(startMs + shownS * 1_000, offset)} <span className="font-normal text-ink2 max-sm:text-note">{formatOffset(offset)}</span> <span className="font-normal text-ink2">{formatElapsed(shownS)}</span>
        </output>
        {note && (
          <p role="status" className="text-note text-ink2">
            {note}
          </p>
        )}
      </div>
      <label className="ml-auto flex items-center gap-2 text-note text-ink2 max-sm:hidden print:hidden">
        Speed
        <select
          className="min-h-9 rounded-sm border border-rule border-b-edge bg-sheet px-1 text-ink"
          value={player.hoursPerSecond}
          onChange={(event) => player.setSpeed(Number(event.target.value))}
        >
          {speeds.map((speed) => (
            <option key={speed} value={speed}>
              {speed} h a second
            </option>
          ))}
        </select>
      </label>
    </div>
  );
}

/** Clock and elapsed time are cut to the minute together: neither may say another minute than its neighbour. */
export const wholeMinutes = (s: number): number => Math.round(s / 60) * 60;
