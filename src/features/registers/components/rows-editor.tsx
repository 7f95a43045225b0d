import type { ReactNode } from 'react';
import { useFieldArray, useFormContext } from 'react-hook-form';
import { formatEntered } from '../../../../shared/format';
import { Button } from '../../../components/button';
import { FieldError } from '../../../components/field';
import { SelectInput, TextInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { messageAt, ownMessageAt } from '../model/form-errors';
import { useValue, type Choice } from './bound-fields';
import { useIsWriting } from './entry-mode';

export type RowColumn = {
  key: string;
  label: string;
  unit?: string;
  kind: 'text' | 'number' | 'choice';
  choices?: readonly Choice[];
  /** Width of the column while writing. */
  width?: string;
  /** On a phone it takes the whole line. */
  isWide?: boolean;
  /** Said for 0 while reading. */
  zeroWords?: string;
};

type Row = Record<string, unknown>;
type Props = {
  name: string;
  caption: string;
  columns: readonly RowColumn[];
  newRow: () => Row;
  addLabel: string;
  rowWord: string;
  empty: string;
  most: number;
  /** Said at the end of a row, for example what its figures come to. */
  trail?: (row: Row) => ReactNode;
  trailLabel?: string;
};

/** A table that is read, or written row by row; on a phone each row stands as a block of labelled fields. */
export function RowsEditor(props: Props) {
  return useIsWriting() ? <WritingRows {...props} /> : <ReadingRows {...props} />;
}

const headClass = 'py-2 pr-4 align-bottom text-note font-semibold text-ink2 last:pr-0';
const headWords = ({ label, unit }: RowColumn) => (unit ? `${label}, ${unit}` : label);

function textOf(value: unknown, column: RowColumn): string {
  if (value === null || value === undefined || value === '') return '';
  if (column.kind === 'number') return value === 0 && column.zeroWords ? column.zeroWords : formatEntered(Number(value));
  return column.choices?.find((choice) => choice.value === value)?.label ?? String(value);
}

function ReadingRows({ name, caption, columns, empty, trail, trailLabel }: Props) {
  const rows = useValue<Row[]>(name);
  if (rows.length === 0) return <p className="py-4 text-ink2">{empty}</p>;
  return (
    <div className="overflow-x-auto" role="region" aria-label={`Table: ${caption}`} tabIndex={0}>
      <table className="w-full border-collapse text-left">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr className="border-b border-edge">
            {columns.map((column) => (
              <th key={column.key} scope="col" className={`${headClass} ${column.kind === 'number' ? 'text-right' : ''}`}>{headWords(column)}</th>
            ))}
            {trail && <th scope="col" className={headClass}>{trailLabel}</th>}
          </tr>
        </thead>
        <tbody>
          {rows.map((row, i) => (
            <tr key={i} className="border-b border-rule align-top">
              {columns.map((column) => (
                <td key={column.key} className={`py-2 pr-4 last:pr-0 ${column.kind === 'number' ? 'text-right whitespace-nowrap' : 'min-w-24'}`}>{textOf(row[column.key], column) || <span className="text-ink2">-</span>}</td>
              ))}
              {trail && <td className="py-2 text-ink2">{trail(row)}</td>}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function WritingRows({ name, caption, columns, newRow, addLabel, rowWord, most, trail, trailLabel }: Props) {
  const { control, formState } = useFormContext();
  const { fields, append, remove } = useFieldArray({ control, name, keyName: 'rowKey' });
  const rows = useValue<Row[]>(name) ?? [];
  const own = ownMessageAt(formState.errors, name);
  return (
    <div>
      {own && <FieldError>{own}</FieldError>}
      <div className="overflow-x-auto pb-2">
      <table className="w-full border-collapse text-left max-sm:block">
        <caption className="sr-only">{caption}</caption>
        <thead className="max-sm:hidden">
          <tr className="border-b border-edge">
            {columns.map((column) => (
              <th key={column.key} scope="col" className={`${headClass} ${column.width ?? ''}`}>{headWords(column)}</th>
            ))}
            {trail && <th scope="col" className={headClass}>{trailLabel}</th>}
            <th scope="col" className={headClass}><span className="sr-only">Remove</span></th>
          </tr>
        </thead>
        <tbody className="max-sm:block">
          {fields.map((field, i) => (
            <tr key={field.rowKey} className="border-b border-rule align-top max-sm:grid max-sm:grid-cols-2 max-sm:gap-x-3 max-sm:gap-y-2 max-sm:py-3">
              {columns.map((column) => (
                <td key={column.key} className={`py-2 pr-3 max-sm:p-0 ${column.isWide ? 'max-sm:col-span-2' : ''}`}>
                  <Cell name={`${name}.${i}.${column.key}`} column={column} rowLabel={`${rowWord} ${i + 1}`} />
                </td>
              ))}
              {trail && <td className="py-3.5 pr-3 text-note text-ink2 max-sm:p-0">{trail(rows[i] ?? {})}</td>}
              <td className="py-2 text-right max-sm:col-start-2 max-sm:p-0">
                <Button kind="quiet" icon="close" aria-label={`Remove ${rowWord} ${i + 1}`} onClick={() => remove(i)} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      </div>
      {fields.length < most && <Button kind="quiet" icon="add" onClick={() => append(newRow())}>{addLabel}</Button>}
    </div>
  );
}

function Cell({ name, column, rowLabel }: { name: string; column: RowColumn; rowLabel: string }) {
  const { register, setValue, formState } = useFormContext();
  const value = useValue<unknown>(name);
  const error = messageAt(formState.errors, name);
  const label = `${rowLabel}: ${headWords(column)}`;
  const shared = { 'aria-label': label, 'aria-invalid': error ? true : undefined, 'aria-describedby': error ? `${name}-error` : undefined };
  return (
    <>
      <span className="mb-0.5 hidden text-note text-ink2 max-sm:block" aria-hidden="true">{headWords(column)}</span>
      {column.kind === 'number' && <NumberInput name={name} {...shared} value={typeof value === 'number' && Number.isFinite(value) ? value : null} onChange={(next) => setValue(name, next, { shouldDirty: true, shouldValidate: formState.isSubmitted })} />}
      {column.kind === 'text' && <TextInput {...register(name)} {...shared} autoComplete="off" />}
      {column.kind === 'choice' && (
        <SelectInput {...register(name)} {...shared}>
          {!column.choices?.some((choice) => choice.value === value) && <option value={String(value ?? '')}>{value ? String(value) : 'Choose…'}</option>}
          {column.choices?.map((choice) => <option key={choice.value} value={choice.value}>{choice.label}</option>)}
        </SelectInput>
      )}
      {error && <FieldError id={`${name}-error`}>{error}</FieldError>}
    </>
  );
}
