import { createContext, useContext, useId, type ReactNode } from 'react';
import { Icon } from './icon';

type FieldContext = { id: string; describedBy: string | undefined; isInvalid: boolean; labelId: string };
const context = createContext<FieldContext | null>(null);

/** What an input takes from the field around it: its id, its description and whether it is refused. */
export function useFieldInput(own: { id?: string | undefined; 'aria-describedby'?: string | undefined; 'aria-invalid'?: unknown }) {
  const field = useContext(context);
  return {
    id: own.id ?? field?.id,
    'aria-describedby': [field?.describedBy, own['aria-describedby']].filter(Boolean).join(' ') || undefined,
    'aria-invalid': (own['aria-invalid'] as boolean | undefined) ?? (field?.isInvalid || undefined),
  };
}
export const useFieldLabelId = (): string | undefined => useContext(context)?.labelId;

type FieldProps = {
  label: ReactNode;
  /** Said in the label, so that it is read with it: "Depth, m". */
  unit?: string | undefined;
  hint?: ReactNode;
  error?: string | undefined;
  /** Id of the input; inputs of this folder take theirs from the field when it is left out. */
  htmlFor?: string;
  /** For several inputs under one name (a range, an instant): a group with a legend. */
  isGroup?: boolean;
  isOptional?: boolean;
  className?: string;
  children: ReactNode;
};

/** Label, input, hint, error: in this order, always. */
export function Field({ label, unit, hint, error, htmlFor, isGroup = false, isOptional = false, className = '', children }: FieldProps) {
  const ownId = useId();
  const id = htmlFor ?? ownId;
  const hintId = `${id}-hint`;
  const errorId = `${id}-error`;
  const labelId = `${id}-label`;
  const describedBy = [error ? errorId : null, hint ? hintId : null].filter(Boolean).join(' ') || undefined;
  const words = (
    <>
      {label}
      {unit && <span className="font-normal text-ink2">, {unit}</span>}
      {isOptional && <span className="font-normal text-ink2"> (may stay empty)</span>}
    </>
  );
  return (
    <div className={`min-w-0 ${className}`} role={isGroup ? 'group' : undefined} aria-labelledby={isGroup ? labelId : undefined} aria-describedby={isGroup ? describedBy : undefined}>
      {isGroup ? (
        <div id={labelId} className="mb-1 font-semibold">
          {words}
        </div>
      ) : (
        <label id={labelId} htmlFor={id} className="mb-1 block font-semibold">
          {words}
        </label>
      )}
      <context.Provider value={{ id, describedBy: isGroup ? undefined : describedBy, isInvalid: !!error, labelId }}>{children}</context.Provider>
      {error && <FieldError id={errorId}>{error}</FieldError>}
      {hint && (
        <p id={hintId} className="mt-1 text-note text-ink2">
          {hint}
        </p>
      )}
    </div>
  );
}

export function FieldError({ id, children }: { id?: string; children: ReactNode }) {
  return (
    <p id={id} role="alert" className="mt-1 flex items-start gap-1.5 text-note font-semibold text-bad">
      <Icon name="attention" className="mt-px size-4" />
      <span>{children}</span>
    </p>
  );
}
