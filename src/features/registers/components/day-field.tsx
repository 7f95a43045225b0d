import { useState } from 'react';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { TextInput } from '../../../components/inputs';
import { isoWithOffset } from '../../../../shared/civil';
import { formatDayYear } from '../../../../shared/format';
import { parseDay } from '../../../lib/parse-instant';
import { useDefaultOffset } from '../../../lib/session';
import { Reading, useBound, useMessage } from './bound-fields';
import { useIsWriting } from './entry-mode';

const readDay = (text: string, offset: string) => parseDay(text, Date.now(), offset);
const todayIn = (offset: string): string => isoWithOffset(Date.now(), offset).slice(0, 10);
const two = (n: number): string => String(n).padStart(2, '0');

/** A day typed as people write it and kept as yyyy-mm-dd; what cannot be a day stays as it was typed and is refused. */
export function DayField({ name, label, hint }: { name: string; label: string; hint?: string }) {
  const { attach, value, set, leave } = useBound(name);
  const error = useMessage(name);
  const offset = useDefaultOffset();
  const stored = (value as string | null) ?? '';
  const [text, setText] = useState(stored);
  const [why, setWhy] = useState<string | null>(null);
  if (!useIsWriting()) return <Reading label={label}>{stored ? formatDayYear(Date.parse(stored), '+00:00') : 'never'}</Reading>;
  const settle = () => {
    leave();
    if (text.trim() === '') return setWhy(null);
    const day = readDay(text, offset);
    setWhy(day.ok ? null : day.why);
    if (day.ok) write(`${day.value.year}-${two(day.value.month)}-${two(day.value.day)}`);
  };
  const write = (next: string) => {
    setText(next);
    set(next.trim() === '' ? null : next);
  };
  return (
    <Field label={label} hint={hint} error={why ?? error} isOptional>
      <span className="flex gap-2">
        <TextInput name={name} ref={attach} value={text} placeholder="yyyy-mm-dd" autoComplete="off" onBlur={settle} onChange={(event) => write(event.target.value)} />
        <Button onClick={() => { setWhy(null); write(todayIn(offset)); }}>Today</Button>
      </span>
    </Field>
  );
}
