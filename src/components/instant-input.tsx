import { useId, useState, type KeyboardEvent } from 'react';
import { instantMs, instantOf, isoWithOffset } from '../../shared/civil';
import { formatDayYear, formatOffset, formatTimeOfDay } from '../../shared/format';
import { classNames } from '../lib/class-names';
import { parseDay, parseTimeOfDay } from '../lib/parse-instant';
import { serverNowMs } from '../lib/server-clock';
import { Button } from './button';
import { FieldError } from './field';
import { inputClass } from './inputs';

type InstantInputProps = {
  /** ISO instant with offset; null while nothing usable has been typed. */
  value: string | null;
  /** The UTC offset in which the time is typed and shown. */
  offset: string;
  onChange: (value: string | null) => void;
  /** Puts a button beside it that sets the present time. */
  hasNow?: boolean;
};

const dayText = (ms: number, offset: string): string => (Number.isNaN(ms) ? '' : isoWithOffset(ms, offset).slice(0, 10));
const timeText = (ms: number, offset: string): string => (Number.isNaN(ms) ? '' : formatTimeOfDay(ms, offset));

/** Day and time of day, with the offset beside them and the weekday read back. Refuses what no calendar has and what can be read two ways. */
export function InstantInput({ value, offset, onChange, hasNow = false }: InstantInputProps) {
  const id = useId();
  const ms = value === null ? Number.NaN : instantMs(value);
  const [day, setDay] = useState(() => dayText(ms, offset));
  const [time, setTime] = useState(() => timeText(ms, offset));
  const [known, setKnown] = useState({ value, offset });
  const [isLeft, setIsLeft] = useState(false);
  // Tells "today" and the year of a day typed without one.
  const [shownAtMs] = useState(serverNowMs);

  const show = (instant: number) => {
    setDay(dayText(instant, offset));
    setTime(timeText(instant, offset));
  };
  if (value !== known.value || offset !== known.offset) {
    setKnown({ value, offset });
    show(ms);
  }
  const send = (next: string | null) => {
    setKnown({ value: next, offset });
    onChange(next);
  };
  const write = (dayTyped: string, timeTyped: string) => {
    setDay(dayTyped);
    setTime(timeTyped);
    const parsedDay = parseDay(dayTyped, shownAtMs, offset);
    const parsedTime = parseTimeOfDay(timeTyped);
    send(parsedDay.ok && parsedTime.ok ? isoWithOffset(instantOf(parsedDay.value, parsedTime.value.hour, parsedTime.value.minute, 0, offset), offset) : null);
  };
  const move = (stepMs: number) => (event: KeyboardEvent) => {
    const way = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0;
    if (way === 0 || Number.isNaN(ms)) return;
    event.preventDefault();
    show(ms + way * stepMs);
    send(isoWithOffset(ms + way * stepMs, offset));
  };
  const setNow = () => {
    const minute = Math.floor(serverNowMs() / 60_000) * 60_000;
    show(minute);
    send(isoWithOffset(minute, offset));
  };
  const leave = () => {
    setIsLeft(true);
    if (!Number.isNaN(ms)) show(ms);
  };

  const dayParsed = parseDay(day, shownAtMs, offset);
  const timeParsed = parseTimeOfDay(time);
  const problem = isLeft ? (!dayParsed.ok ? dayParsed.why : !timeParsed.ok ? timeParsed.why : null) : null;
  return (
    <>
      <div className="flex flex-wrap items-center gap-2">
        <input
          id={`${id}-day`}
          aria-label="Day"
          aria-describedby={`${id}-read`}
          aria-invalid={(isLeft && !dayParsed.ok) || undefined}
          value={day}
          placeholder="2031-05-12"
          autoComplete="off"
          onChange={(event) => write(event.target.value, time)}
          onBlur={leave}
          onKeyDown={move(86_400_000)}
          className={classNames(inputClass, 'w-34!')}
        />
        <input
          id={`${id}-time`}
          aria-label={`Time of day, ${formatOffset(offset)}`}
          aria-describedby={`${id}-read`}
          aria-invalid={(isLeft && !timeParsed.ok) || undefined}
          value={time}
          placeholder="06:40"
          autoComplete="off"
          inputMode="numeric"
          onChange={(event) => write(day, event.target.value)}
          onBlur={leave}
          onKeyDown={move(300_000)}
          className={classNames(inputClass, 'w-20!')}
        />
        <span className="whitespace-nowrap text-ink2">{formatOffset(offset)}</span>
        {hasNow && (
          <Button kind="quiet" onClick={setNow}>
            Set to now
          </Button>
        )}
      </div>
      {problem ? (
        <FieldError id={`${id}-read`}>{problem}</FieldError>
      ) : (
        <p id={`${id}-read`} className="mt-1 text-note text-ink2">
          {Number.isNaN(ms) ? 'Day as 2031-05-12 or 12 May, time as 06:40' : `Read as ${formatDayYear(ms, offset)} ${formatTimeOfDay(ms, offset)}`}
        </p>
      )}
    </>
  );
}
