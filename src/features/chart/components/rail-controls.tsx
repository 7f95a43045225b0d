import { formatClockOffset, formatElapsed } from '../../../../shared/format';
import { Button } from '../../../components/button';
import { speeds, type Player } from '../hooks/use-player';

/** Play, step, speed, and the time shown in large figures. */
export function RailControls({ player, startMs, offset, note }: { player: Player; startMs: number; offset: string; note: string }) {
  return (
    <div className="flex flex-wrap items-center gap-x-3 gap-y-1 px-3 pt-2 pb-1">
      <div className="flex gap-1 print:hidden">
        <Button kind="quiet" onClick={() => player.step(-1)} aria-label="One step back" icon="back" />
        <Button kind="plain" onClick={player.toggle} aria-label={player.isPlaying ? 'Pause' : 'Play'} icon={player.isPlaying ? 'pause' : 'play'} />
        <Button kind="quiet" onClick={() => player.step(1)} aria-label="One step forward" icon="forward" />
      </div>
      <output aria-live="off" className="text-lead font-semibold">
        {formatClockOffset(startMs + player.timeS * 1_000, offset)} <span className="font-normal text-ink2">{formatElapsed(player.timeS)}</span>
      </output>
      <label className="ml-auto flex items-center gap-2 text-note text-ink2 print:hidden">
        Speed
        <select
          className="min-h-9 rounded-sm border border-edge bg-sheet px-1 text-ink"
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
      {note && (
        <p role="status" className="w-full text-note text-ink2 sm:w-auto">
          {note}
        </p>
      )}
    </div>
  );
}
