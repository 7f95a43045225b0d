import { useId, useState, type InputHTMLAttributes, type KeyboardEvent, type Ref } from 'react';
import { formatEntered } from '../../shared/format';
import { classNames } from '../lib/class-names';
import { parseNumber } from '../lib/parse-number';
import { FieldError, useFieldInput } from './field';
import { inputClass } from './inputs';

type NumberInputProps = Omit<InputHTMLAttributes<HTMLInputElement>, 'value' | 'onChange' | 'min' | 'max' | 'step' | 'type'> & {
  value: number | null;
  /** Null while the field is empty or holds what is no number. */
  onChange: (value: number | null) => void;
  unit?: string;
  min?: number;
  max?: number;
  /** Arrow keys move by this. */
  step?: number;
  ref?: Ref<HTMLInputElement>;
};

const asTyped = (value: number | null): string => (value === null || !Number.isFinite(value) ? '' : String(value));

/** What is wrong with the text, in words that name the value and the remedy. */
function problemOf(text: string, { min, max, unit = '' }: { min?: number | undefined; max?: number | undefined; unit?: string | undefined }): string | null {
  const parsed = parseNumber(text);
  if (parsed.kind === 'refused') return parsed.why;
  if (parsed.kind === 'empty') return null;
  const say = (n: number) => `${formatEntered(n)} ${unit}`.trim();
  if (min !== undefined && parsed.value < min) return `${say(parsed.value)} is too low: at least ${say(min)}`;
  if (max !== undefined && parsed.value > max) return `${say(parsed.value)} is too high: at most ${say(max)}`;
  return null;
}

/** Takes a decimal point or a decimal comma and keeps the text as it was typed. */
export function NumberInput({ value, onChange, unit, min, max, step, className, ref, onBlur, onKeyDown, ...rest }: NumberInputProps) {
  const problemId = useId();
  const [text, setText] = useState(() => asTyped(value));
  const [known, setKnown] = useState(value);
  const [isLeft, setIsLeft] = useState(false);
  // A value set from outside replaces the text; one that only echoes what was typed leaves it alone.
  if (value !== known) {
    setKnown(value);
    const parsed = parseNumber(text);
    if ((parsed.kind === 'number' ? parsed.value : null) !== value) setText(asTyped(value));
  }
  const write = (next: string) => {
    setText(next);
    const parsed = parseNumber(next);
    const number = parsed.kind === 'number' ? parsed.value : null;
    setKnown(number);
    onChange(number);
  };
  const press = (event: KeyboardEvent<HTMLInputElement>) => {
    onKeyDown?.(event);
    const way = event.key === 'ArrowUp' ? 1 : event.key === 'ArrowDown' ? -1 : 0;
    if (way === 0 || step === undefined) return;
    event.preventDefault();
    const moved = Number(((value ?? 0) + way * step).toPrecision(12));
    write(String(Math.min(max ?? Infinity, Math.max(min ?? -Infinity, moved))));
  };
  const parsedKind = parseNumber(text).kind;
  // Half a number is no mistake yet: wait until the field is left before refusing it.
  const problem = isLeft ? problemOf(text, { min, max, unit }) : null;
  const field = useFieldInput({ ...rest, 'aria-describedby': classNames(problem && problemId, rest['aria-describedby']) });
  return (
    <>
      <span className="relative block">
        <input
          {...rest}
          {...field}
          ref={ref}
          type="text"
          inputMode="decimal"
          autoComplete="off"
          value={text}
          aria-invalid={field['aria-invalid'] ?? (problem ? true : undefined)}
          onChange={(event) => {
            if (parsedKind !== 'refused') setIsLeft(false);
            write(event.target.value);
          }}
          onBlur={(event) => {
            setIsLeft(true);
            onBlur?.(event);
          }}
          onKeyDown={press}
          className={classNames(inputClass, unit && 'pr-14', className)}
        />
        {unit && (
          <span className="pointer-events-none absolute inset-y-0 right-3 flex items-center text-note text-ink2" aria-hidden="true">
            {unit}
          </span>
        )}
      </span>
      {problem && <FieldError id={problemId}>{problem}</FieldError>}
    </>
  );
}
