import { instantMs } from '../../shared/civil';
import { formatClock, formatDayYear, formatElapsed, formatOffset, formatTimeOfDay } from '../../shared/format';

type TimeTextProps = {
  iso: string;
  offset: string;
  /** How much is said: the clock with its day, only the time of day, or only the day with its year. */
  say?: 'clock' | 'time' | 'day';
  /** T0 as ISO: the elapsed time is said beside the clock. */
  since?: string;
  /** The offset may be left out where the same line or column head gives it. */
  hasOffset?: boolean;
};

/** A clock time, readable by machines as well. */
export function TimeText({ iso, offset, say = 'clock', since, hasOffset = true }: TimeTextProps) {
  const ms = instantMs(iso);
  if (Number.isNaN(ms)) return <span>not known</span>;
  const write = { clock: formatClock, time: formatTimeOfDay, day: formatDayYear }[say];
  return (
    <time dateTime={iso} className="whitespace-nowrap">
      {write(ms, offset)}
      {hasOffset && say !== 'day' && <span className="text-ink2"> {formatOffset(offset)}</span>}
      {since && <span className="text-ink2"> {formatElapsed((ms - instantMs(since)) / 1_000)}</span>}
    </time>
  );
}
