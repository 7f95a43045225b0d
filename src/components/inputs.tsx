import type { InputHTMLAttributes, ReactNode, Ref, SelectHTMLAttributes, TextareaHTMLAttributes } from 'react';
import { classNames } from '../lib/class-names';
import { useFieldInput } from './field';
import { Icon } from './icon';

/** Ruled like a line to write on: a firm line below, thin ones around. */
export const inputClass =
  'block w-full min-w-0 min-h-10 rounded-sm border border-rule border-b-edge bg-sheet px-3 py-1.5 text-body text-ink pointer-coarse:min-h-11 max-sm:min-h-11 max-sm:text-[1rem] hover:border-edge focus:border-kingfisher aria-invalid:border-bad aria-invalid:border-b-2 disabled:bg-paper disabled:text-ink2 forced-colors:border-[ButtonBorder]';

export function TextInput({ className, ...rest }: InputHTMLAttributes<HTMLInputElement> & { ref?: Ref<HTMLInputElement> }) {
  return <input type="text" {...rest} {...useFieldInput(rest)} className={classNames(inputClass, className)} />;
}

export function TextArea({ className, rows = 3, ...rest }: TextareaHTMLAttributes<HTMLTextAreaElement> & { ref?: Ref<HTMLTextAreaElement> }) {
  return <textarea rows={rows} {...rest} {...useFieldInput(rest)} className={classNames(inputClass, 'field-sizing-content max-h-80 min-h-18', className)} />;
}

export function SelectInput({ className, children, ...rest }: SelectHTMLAttributes<HTMLSelectElement> & { ref?: Ref<HTMLSelectElement> }) {
  return (
    <span className="relative block">
      <select {...rest} {...useFieldInput(rest)} className={classNames(inputClass, 'appearance-none pr-9', className)}>
        {children}
      </select>
      <span className="pointer-events-none absolute inset-y-0 right-2.5 flex items-center text-ink2 forced-colors:hidden">
        <Icon name="down" className="size-4" />
      </span>
    </span>
  );
}

export function CheckInput({ label, hint, className, ...rest }: Omit<InputHTMLAttributes<HTMLInputElement>, 'type'> & { label: ReactNode; hint?: ReactNode; ref?: Ref<HTMLInputElement> }) {
  return (
    <label className={classNames('flex min-h-10 cursor-pointer items-start gap-3 py-2 pointer-coarse:min-h-11', className)}>
      <input type="checkbox" {...rest} className="mt-0.5 size-4.5 shrink-0 accent-kingfisher" />
      <span>
        {label}
        {hint && <span className="block text-note text-ink2">{hint}</span>}
      </span>
    </label>
  );
}

export type Choice<V extends string> = { value: V; label: ReactNode; hint?: ReactNode };

/** One of a few, all in sight: radio buttons in a row of ruled cells. */
export function ChoiceInput<V extends string>({ name, value, onChange, choices, label }: { name: string; value: V; onChange: (value: V) => void; choices: readonly Choice<V>[]; label: string }) {
  return (
    <div role="radiogroup" aria-label={label} className="flex flex-wrap border-y border-rule">
      {choices.map((choice) => (
        <label
          key={choice.value}
          className="flex min-h-11 flex-1 basis-32 cursor-pointer items-start gap-2.5 border-b-3 border-transparent px-3 py-2 hover:bg-sheet has-checked:border-kingfisher has-checked:bg-sheet has-focus-visible:outline-2 has-focus-visible:outline-kingfisher"
        >
          <input type="radio" name={name} value={choice.value} checked={value === choice.value} onChange={() => onChange(choice.value)} className="mt-1 accent-kingfisher outline-none" />
          <span>
            <span className="font-semibold">{choice.label}</span>
            {choice.hint && <span className="block text-note text-ink2">{choice.hint}</span>}
          </span>
        </label>
      ))}
    </div>
  );
}

export function SearchInput({ label, value, onChange, className, ...rest }: Omit<InputHTMLAttributes<HTMLInputElement>, 'onChange' | 'value'> & { label: string; value: string; onChange: (value: string) => void }) {
  return (
    <span className={classNames('relative block', className)}>
      <span className="pointer-events-none absolute inset-y-0 left-2.5 flex items-center text-ink2">
        <Icon name="search" className="size-4.5" />
      </span>
      <input {...rest} type="search" aria-label={label} placeholder={rest.placeholder ?? label} value={value} onChange={(event) => onChange(event.target.value)} className={classNames(inputClass, 'pl-9')} />
    </span>
  );
}
