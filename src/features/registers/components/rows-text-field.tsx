import { useState, type ReactNode } from 'react';
import { Field } from '../../../components/field';
import { TextArea, TextInput } from '../../../components/inputs';
import type { RowsRead } from '../model/text-rows';
import { Reading, useBound, useMessage } from './bound-fields';
import { useIsWriting } from './entry-mode';

type Props<Row> = {
  name: string;
  label: string;
  hint?: string;
  read: (text: string) => RowsRead<Row>;
  write: (rows: Row) => string;
  /** One line instead of many. */
  isLine?: boolean;
  isOptional?: boolean;
  className?: string;
  /** What stands here while reading. */
  summary: (rows: Row) => ReactNode;
};

/** A list typed as text. The text stays as it was typed; what it says goes into the form. */
export function RowsTextField<Row>({ name, label, hint, read, write, isLine = false, isOptional = false, className, summary }: Props<Row>) {
  const { attach, value, set, leave } = useBound(name);
  const error = useMessage(name);
  const rows = value as Row;
  const [text, setText] = useState(() => write(rows));
  const [known, setKnown] = useState(rows);
  // Rows set from outside replace the text; those that echo what was typed leave it alone.
  if (rows !== known) {
    setKnown(rows);
    setText(write(rows));
  }
  if (!useIsWriting()) return <Reading label={label} className={className}>{summary(rows)}</Reading>;
  const type = (next: string) => {
    setText(next);
    const { rows: parsed } = read(next);
    setKnown(parsed);
    set(parsed);
  };
  const own = { name, value: text, onBlur: leave, autoComplete: 'off', spellCheck: false };
  return (
    <Field label={label} hint={hint} error={read(text).problem ?? error} isOptional={isOptional} {...(className ? { className } : {})}>
      {isLine ? <TextInput {...own} ref={attach} onChange={(event) => type(event.target.value)} /> : <TextArea {...own} ref={attach} rows={8} className="font-mono text-note" onChange={(event) => type(event.target.value)} />}
    </Field>
  );
}
