import { zodResolver } from '@hookform/resolvers/zod';
import { useQueryClient } from '@tanstack/react-query';
import { useRef, useState, type RefObject } from 'react';
import { FormProvider, useForm, type FieldValues, type Resolver } from 'react-hook-form';
import { registerWriteSchema, type RegisterItem, type RegisterName } from '../../../../shared/schemas/registers';
import { Button } from '../../../components/button';
import { Notice } from '../../../components/notice';
import { Section } from '../../../components/page';
import { ApiError } from '../../../lib/api-client';
import { placeErrors } from '../../../lib/form-errors';
import { registerItemQuery, useSaveEntry, type EntryBody } from '../api';
import type { EntryValues } from '../model/empty-entry';
import { pathsOf } from '../model/form-errors';
import { FieldGrid, TextField } from './bound-fields';
import { ConflictPanel } from './conflict-panel';
import { EntryFields } from './entry-fields';
import { EntryModeContext } from './entry-mode';
import { ErrorSummary, ToMend } from './error-summary';
import { LeaveGuard } from './leave-guard';

type Props = {
  register: RegisterName;
  /** The entry this edit begins with; null for a new one. */
  start: RegisterItem | null;
  /** The entry as the server has it now. */
  current: RegisterItem | null;
  initial: EntryValues;
  onSaved: (item: RegisterItem) => void;
  onLeave: () => void;
};

/** An entry being written. What is typed stays through refusals, conflicts and lost connections. */
export function EntryWriting({ register, start, current, initial, onSaved, onLeave }: Props) {
  const form = useForm<FieldValues>({ defaultValues: initial, resolver: zodResolver(registerWriteSchema(register) as never) as unknown as Resolver<FieldValues>, mode: 'onTouched' });
  const client = useQueryClient();
  const save = useSaveEntry(register, start?.id ?? null);
  const [base, setBase] = useState(start);
  const [refusal, setRefusal] = useState<string | null>(null);
  const top = useRef<HTMLDivElement>(null);
  const hasConflict = base !== null && current !== null && current.version > base.version;

  const store = async (body: FieldValues) => {
    setRefusal(null);
    try {
      onSaved(await save.mutateAsync((base ? { ...body, version: base.version } : body) as EntryBody));
    } catch (error) {
      if (error instanceof ApiError && error.is('stale-version') && error.problem.current && start) client.setQueryData(registerItemQuery(register, start.id).queryKey, error.problem.current as RegisterItem);
      else setRefusal(placeErrors(error, form.setError, pathsOf(form.getValues())));
    }
  };

  return (
    <EntryModeContext value="write">
      <FormProvider {...form}>
        <form noValidate onSubmit={(event) => void form.handleSubmit(store)(event)} aria-label={start ? `Edit ${start.name}` : 'New entry'}>
          <div ref={top} tabIndex={-1} className="outline-none" />
          {hasConflict && <ConflictPanel key={current.version} base={base} theirs={current} onResolved={() => setBase(current)} />}
          {refusal && <Notice tone="bad" className="mt-6" title="This could not be saved">{refusal}</Notice>}
          <ErrorSummary />
          <EntryFields register={register} isNew={start === null} />
          <Section title="Why" note="kept in the history">
            <FieldGrid>
              <TextField name="reason" label={start ? 'Why it changes' : 'Why it is added'} isOptional className="sm:col-span-2 lg:col-span-3" />
            </FieldGrid>
          </Section>
          <div className="sticky bottom-0 z-10 mt-8 flex flex-wrap items-center gap-3 border-t border-ink bg-paper py-3">
            <Button type="submit" kind="primary" isBusy={save.isPending} disabled={hasConflict}>{start ? 'Save changes' : 'Save entry'}</Button>
            <Button onClick={onLeave}>Leave without saving</Button>
            {hasConflict ? <Button kind="quiet" icon="attention" onClick={() => show(top)}>{`${current.updatedBy} saved version ${current.version}: see what changed`}</Button> : <ToMend onShow={() => show(top)} />}
          </div>
        </form>
        <LeaveGuard isOn={form.formState.isDirty && !save.isSuccess} />
      </FormProvider>
    </EntryModeContext>
  );
}

function show(top: RefObject<HTMLElement | null>): void {
  top.current?.scrollIntoView({ block: 'center' });
  top.current?.focus({ preventScroll: true });
}
