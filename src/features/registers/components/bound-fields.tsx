import type { ReactNode } from 'react';
import { useController, useFormContext, useWatch } from 'react-hook-form';
import { formatEntered } from '../../../../shared/format';
import { Field } from '../../../components/field';
import { CheckInput, SelectInput, TextArea, TextInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { messageAt } from '../model/form-errors';
import { useIsWriting } from './entry-mode';

type Bound = { name: string; label: string; unit?: string; hint?: string; isOptional?: boolean; className?: string };
export type Choice = { value: string; label: string };

/** The message of a field, also after a server refused it. */
export function useMessage(name: string): string | undefined {
  const { formState } = useFormContext();
  return messageAt(formState.errors, name);
}
/** A field's value and what its input is tied to. */
export function useBound(name: string) {
  const { field } = useController({ name });
  const { ref: attach, value, onChange: set, onBlur: leave } = field;
  return { attach, value: value as unknown, set, leave };
}
export const useValue = <T,>(name: string): T => useWatch({ name }) as T;

/** What is read: the label small, the value below, a dash where nothing is known. */
export function Reading({ label, unit, className = '', children }: { label: ReactNode; unit?: string | undefined; className?: string | undefined; children: ReactNode }) {
  const isEmpty = children === null || children === undefined || children === '';
  return (
    <div className={`min-w-0 ${className}`}>
      <dt className="text-note text-ink2">{label}</dt>
      <dd className="break-words whitespace-pre-line">
        {isEmpty ? <span className="text-ink2">not known</span> : children}
        {!isEmpty && unit && <span className="text-ink2">&nbsp;{unit}</span>}
      </dd>
    </div>
  );
}

/** Fields side by side; a list of terms while reading. */
export function FieldGrid({ children, className = '' }: { children: ReactNode; className?: string }) {
  const grid = `grid grid-cols-1 gap-x-6 gap-y-4 pt-4 sm:grid-cols-2 lg:grid-cols-3 ${className}`;
  return useIsWriting() ? <div className={grid}>{children}</div> : <dl className={grid}>{children}</dl>;
}

export function TextField({ name, label, unit, hint, isOptional, className, type = 'text', href }: Bound & { type?: string; href?: (value: string) => string }) {
  const { attach, value: stored, set, leave } = useBound(name);
  const error = useMessage(name);
  const value = String(stored ?? '');
  if (!useIsWriting()) return <Reading label={label} unit={unit} className={className}>{value && href ? <a href={href(value)}>{value}</a> : value}</Reading>;
  return (
    <Field label={label} unit={unit} hint={hint} error={error} isOptional={isOptional ?? false} {...(className ? { className } : {})}>
      <TextInput name={name} ref={attach} type={type} value={value} onBlur={leave} onChange={set} autoComplete="off" />
    </Field>
  );
}

export function LongTextField({ name, label, hint, isOptional, showsEmpty = false, className = 'sm:col-span-2 lg:col-span-3' }: Bound & { showsEmpty?: boolean }) {
  const { attach, value: stored, set, leave } = useBound(name);
  const error = useMessage(name);
  if (!useIsWriting()) return stored || showsEmpty ? <Reading label={label} className={`max-w-[75ch] ${className}`}>{String(stored ?? '')}</Reading> : null;
  return (
    <Field label={label} hint={hint} error={error} isOptional={isOptional ?? false} className={className}>
      <TextArea name={name} ref={attach} value={String(stored ?? '')} rows={2} onBlur={leave} onChange={set} />
    </Field>
  );
}

type NumberFieldProps = Bound & { range?: string; step?: number; emptyWords?: string };

/** A figure with its unit and, while writing, the range it may have. */
export function NumberField({ name, label, unit, hint, range, isOptional, className, step, emptyWords }: NumberFieldProps) {
  const { attach, value: stored, set, leave } = useBound(name);
  const error = useMessage(name);
  const value = typeof stored === 'number' && Number.isFinite(stored) ? stored : null;
  if (!useIsWriting()) return <Reading label={label} unit={value === null ? undefined : unit} className={className}>{value === null ? emptyWords : formatEntered(value)}</Reading>;
  return (
    <Field label={label} unit={unit} hint={[hint, range].filter(Boolean).join(' ') || undefined} error={error} isOptional={isOptional ?? false} {...(className ? { className } : {})}>
      <NumberInput name={name} ref={attach} value={value} onChange={set} onBlur={leave} {...(unit ? { unit } : {})} {...(step === undefined ? {} : { step })} />
    </Field>
  );
}

type SelectFieldProps = Bound & { choices: readonly Choice[]; emptyLabel?: string; onChosen?: (value: string | null) => void };

/** One of a list. With `emptyLabel` it may stay empty, and then holds null. */
export function SelectField({ name, label, hint, choices, emptyLabel, onChosen, isOptional, className }: SelectFieldProps) {
  const { attach, value: stored, set, leave } = useBound(name);
  const error = useMessage(name);
  const value = (stored as string | null) ?? '';
  const known = choices.find((choice) => choice.value === value);
  if (!useIsWriting()) return <Reading label={label} className={className}>{known?.label ?? (value || emptyLabel)}</Reading>;
  const choose = (next: string) => {
    const chosen = next === '' && emptyLabel !== undefined ? null : next;
    if (onChosen) onChosen(chosen);
    else set(chosen);
  };
  return (
    <Field label={label} hint={hint} error={error} isOptional={isOptional ?? false} {...(className ? { className } : {})}>
      <SelectInput name={name} ref={attach} value={value} onBlur={leave} onChange={(event) => choose(event.target.value)}>
        {emptyLabel !== undefined ? <option value="">{emptyLabel}</option> : !known && <option value={value}>{value === '' ? 'Choose…' : `${value} (not in the register)`}</option>}
        {choices.map((choice) => (
          <option key={choice.value} value={choice.value}>{choice.label}</option>
        ))}
      </SelectInput>
    </Field>
  );
}

export function CheckField({ name, label, hint, readWords }: Bound & { readWords: [yes: string, no: string] }) {
  const { attach, value: stored, set, leave } = useBound(name);
  if (!useIsWriting()) return <Reading label={label}>{stored ? readWords[0] : readWords[1]}</Reading>;
  return <CheckInput name={name} ref={attach} label={label} hint={hint} checked={stored === true} onBlur={leave} onChange={(event) => set(event.target.checked)} />;
}
