import { useQuery } from '@tanstack/react-query';
import { useState, type SubmitEvent } from 'react';
import { instantMs, isoWithOffset } from '../../../../shared/civil';
import { formatDayYear, formatOffset } from '../../../../shared/format';
import type { Incident, LogEntry } from '../../../../shared/schemas/incidents';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { InstantInput } from '../../../components/instant-input';
import { TextArea } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { Section } from '../../../components/page';
import { Loading } from '../../../components/progress-text';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { TimeText } from '../../../components/time-text';
import { errorText } from '../../../lib/form-errors';
import { serverNowMs } from '../../../lib/server-clock';
import { logQuery, useAddLogEntry } from '../api';

/** The incident's log, the newest entry first. Entries are added, never changed. */
export function Log({ incident }: { incident: Incident }) {
  const { data, error } = useQuery(logQuery(incident.id));
  const days = data ? byDay([...data].reverse(), incident.utcOffset) : [];
  return (
    <Section title="Log" note={`newest first, ${formatOffset(incident.utcOffset)}`}>
      {incident.abilities.log && <LogForm incident={incident} />}
      {error && !data && (
        <Notice tone="bad" title="The log cannot be read" className="mt-4">
          {errorText(error)}
        </Notice>
      )}
      {!data && !error && <Loading what="the log" />}
      {days.map(({ day, entries }) => (
        <div key={day}>
          <h3 className="border-b border-rule pt-5 pb-1 font-semibold">{day}</h3>
          <RuledList label={`Log of ${day}`} isOrdered>
            {entries.map((entry) => (
              <LogRow key={entry.id} entry={entry} offset={incident.utcOffset} />
            ))}
          </RuledList>
        </div>
      ))}
    </Section>
  );
}

const whenOf = (entry: LogEntry): string => entry.occurredAt ?? entry.at;

function byDay(entries: readonly LogEntry[], offset: string): { day: string; entries: LogEntry[] }[] {
  const days: { day: string; entries: LogEntry[] }[] = [];
  for (const entry of [...entries].sort((a, b) => instantMs(whenOf(b)) - instantMs(whenOf(a)))) {
    const day = formatDayYear(instantMs(whenOf(entry)), offset);
    const last = days[days.length - 1];
    if (last?.day === day) last.entries.push(entry);
    else days.push({ day, entries: [entry] });
  }
  return days;
}

function LogRow({ entry, offset }: { entry: LogEntry; offset: string }) {
  const isSystem = entry.kind === 'system';
  return (
    <RuledRow
      leadWidth="narrow"
      lead={
        <span className="text-lead font-semibold text-ink">
          <TimeText iso={whenOf(entry)} offset={offset} say="time" hasOffset={false} />
        </span>
      }
    >
      <p className={`max-w-[75ch] break-words whitespace-pre-line ${isSystem ? 'text-ink2 italic' : ''}`}>{entry.text}</p>
      <p className="text-note text-ink2">
        {entry.by}
        {entry.occurredAt && (
          <>
            , written <TimeText iso={entry.at} offset={offset} hasOffset={false} />
          </>
        )}
      </p>
    </RuledRow>
  );
}

function LogForm({ incident }: { incident: Incident }) {
  const add = useAddLogEntry(incident.id);
  const [text, setText] = useState('');
  const [isEarlier, setIsEarlier] = useState(false);
  const [occurredAt, setOccurredAt] = useState<string | null>(null);
  const [asked, setAsked] = useState(false);
  const isReady = text.trim() !== '' && (!isEarlier || occurredAt !== null);
  const submit = async (event?: SubmitEvent) => {
    event?.preventDefault();
    setAsked(true);
    if (!isReady || add.isPending) return;
    await add.mutateAsync({ text: text.trim(), occurredAt: isEarlier ? occurredAt : null }).then(
      () => {
        setText('');
        setIsEarlier(false);
        setAsked(false);
      },
      () => undefined,
    );
  };
  const openEarlier = () => {
    setOccurredAt(isoWithOffset(Math.floor(serverNowMs() / 60_000) * 60_000, incident.utcOffset));
    setIsEarlier(true);
  };
  return (
    <form onSubmit={(event) => void submit(event)} className="no-print flex flex-col gap-3 border-b border-rule py-4" noValidate>
      <Field label="New entry" error={asked && text.trim() === '' ? 'Write something' : undefined}>
        <TextArea
          rows={2}
          value={text}
          maxLength={4_000}
          onChange={(event) => setText(event.target.value)}
          onKeyDown={(event) => {
            if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) void submit();
          }}
        />
      </Field>
      {isEarlier && (
        <Field label="Happened at" isGroup>
          <InstantInput value={occurredAt} offset={incident.utcOffset} onChange={setOccurredAt} />
        </Field>
      )}
      {add.error && (
        <Notice tone="bad" title="The entry was not added">
          {errorText(add.error)}
        </Notice>
      )}
      <div className="flex flex-wrap items-center gap-2">
        <Button type="submit" isBusy={add.isPending}>
          Add entry
        </Button>
        <Button kind="quiet" icon="clock" onClick={isEarlier ? () => setIsEarlier(false) : openEarlier}>
          {isEarlier ? 'It happened now' : 'It happened earlier'}
        </Button>
      </div>
    </form>
  );
}
