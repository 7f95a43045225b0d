import { useMemo, useState, type ReactNode } from 'react';
import { useFieldArray, useFormContext } from 'react-hook-form';
import type { Reach } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { FieldError } from '../../../components/field';
import { Section } from '../../../components/page';
import { emptyFlow, emptyReach } from '../model/empty-entry';
import { errorsUnder, ownMessageAt } from '../model/form-errors';
import { boundsOf, isDrawable } from '../model/place';
import { readNames, writeNames } from '../model/text-rows';
import { FieldGrid, TextField, useValue } from './bound-fields';
import { EntryMap } from './entry-map';
import { useIsWriting } from './entry-mode';
import { ReachFields } from './reach-fields';
import { ReachTable } from './reach-table';
import { RowsTextField } from './rows-text-field';
import { NotesSection } from './notes-section';

/** A reach with a row for each flow that is named for the river. */
const withFlows = (reach: Record<string, unknown>, flowNames: readonly string[]): Record<string, unknown> => {
  const rows = (reach.hydraulics as { flowName: string }[] | undefined) ?? [];
  return { ...reach, hydraulics: [...rows, ...flowNames.filter((name) => !rows.some((row) => row.flowName === name)).map(emptyFlow)] };
};

export function RiverFields({ kindField }: { kindField: ReactNode }) {
  const { control, formState } = useFormContext();
  const isWriting = useIsWriting();
  const { fields, append, remove } = useFieldArray({ control, name: 'data.reaches', keyName: 'rowKey' });
  const reaches = useValue<Reach[] | undefined>('data.reaches') ?? noReaches;
  const flowNames = useValue<string[]>('data.flowNames');
  const [openIndex, setOpenIndex] = useState(0);
  const open = Math.min(openIndex, fields.length - 1);
  const drawable = useMemo(() => reaches.filter((reach) => isDrawable(reach.centreline) && reach.hydraulics.length > 0), [reaches]);
  const openLine = reaches[open]?.centreline;
  const fitTo = boundsOf(isWriting && isDrawable(openLine) ? openLine! : drawable.flatMap(({ centreline }) => centreline));
  const problemsOf = (index: number): number => errorsUnder((formState.errors as { data?: { reaches?: unknown[] } }).data?.reaches?.[index]).length;
  const ownProblem = ownMessageAt(formState.errors, 'data.reaches');
  const add = () => {
    const taken = new Set(reaches.map(({ id }) => id));
    let n = fields.length + 1;
    while (taken.has(`reach-${n}`)) n += 1;
    append(withFlows(emptyReach(n, []), flowNames), { shouldFocus: false });
    setOpenIndex(fields.length);
  };
  return (
    <>
      <Section title="River">
        <FieldGrid>
          {kindField}
          <TextField name="data.chainageOrigin" label="Chainage counts from" hint="Where km 0 is and which way it rises" className="lg:col-span-2" isOptional />
          <RowsTextField name="data.flowNames" label="Named flows" hint="The usual one first, with a comma between them. Every reach needs a row for each." isLine read={readNames} write={writeNames} summary={writeNames} />
        </FieldGrid>
        <div className="pt-4">
          <EntryMap label="Map of the reaches" reaches={drawable} area={noArea} mark={null} fitTo={fitTo} />
        </div>
      </Section>
      <Section title="Reaches" note="a stretch of river between two changes" actions={isWriting && <Button kind="quiet" icon="add" onClick={add}>Add reach</Button>}>
        {ownProblem && <FieldError>{ownProblem}</FieldError>}
        <ReachTable reaches={reaches} openIndex={open} onOpen={setOpenIndex} problemsOf={problemsOf} />
      </Section>
      {fields[open] && (
        <ReachFields
          key={fields[open].rowKey}
          name={`data.reaches.${open}`}
          others={reaches.filter((_, i) => i !== open)}
          onRemove={fields.length > 1 ? () => {
            remove(open);
            setOpenIndex(0);
          } : undefined}
        />
      )}
      <NotesSection />
    </>
  );
}

const noArea: never[] = [];
const noReaches: Reach[] = [];
