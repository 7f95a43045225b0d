import { useState } from 'react';
import { useFormContext } from 'react-hook-form';
import type { RegisterItem } from '../../../../shared/schemas/registers';
import { Button } from '../../../components/button';
import { ChoiceInput } from '../../../components/inputs';
import { Notice } from '../../../components/notice';
import { conflictParts, valueAt } from '../model/conflict';
import { type EntryValues, valuesOf } from '../model/empty-entry';
import { pathWords } from '../model/path-words';
import { ChangeList } from './change-list';

type Side = 'theirs' | 'mine';

/** Somebody else has saved while this was being typed: both sides in sight, and a choice for each part. Nothing typed is lost. */
export function ConflictPanel({ base, theirs, onResolved }: { base: RegisterItem; theirs: RegisterItem; onResolved: () => void }) {
  const form = useFormContext();
  const [chosen, setChosen] = useState<Record<string, Side>>({});
  const theirValues = valuesOf(theirs);
  const parts = conflictParts(valuesOf(base), theirValues, form.watch() as EntryValues);
  const sideOf = (part: (typeof parts)[number]): Side => chosen[part.path] ?? (part.mine.length > 0 ? 'mine' : 'theirs');
  const goOn = () => {
    for (const part of parts) if (sideOf(part) === 'theirs') form.setValue(part.path, valueAt(theirValues, part.path), { shouldDirty: true });
    onResolved();
  };
  return (
    <Notice
      tone="attention"
      className="mt-6"
      title={`${theirs.updatedBy} saved version ${theirs.version} while you were editing version ${base.version}`}
      actions={
        <>
          <Button kind="primary" onClick={goOn}>Go on from version {theirs.version}</Button>
          <a className="inline-flex min-h-10 items-center px-2" href={`?version=${theirs.version}`} target="_blank" rel="noreferrer">Open theirs beside</a>
        </>
      }
    >
      <p>What you typed is still here. Choose for each part that they changed, then go on and save.</p>
      {parts.length === 0 && <p className="mt-2">Their version says the same as the one you began with.</p>}
      {parts.map((part) => (
        <div key={part.path} className="mt-3 border-t border-rule pt-2">
          <p className="font-semibold">{pathWords(part.path)}</p>
          <div className="grid gap-x-6 sm:grid-cols-2">
            <div>
              <p className="text-note text-ink2">They changed</p>
              <ChangeList changes={part.theirs} />
            </div>
            <div>
              <p className="text-note text-ink2">You changed</p>
              {part.mine.length > 0 ? <ChangeList changes={part.mine} /> : <p>nothing here</p>}
            </div>
          </div>
          <ChoiceInput<Side>
            name={`side-${part.path}`}
            label={`Which ${pathWords(part.path)} to keep`}
            value={sideOf(part)}
            onChange={(side) => setChosen((before) => ({ ...before, [part.path]: side }))}
            choices={[{ value: 'theirs', label: 'Take theirs' }, { value: 'mine', label: part.mine.length > 0 ? 'Keep mine' : 'Keep it as it was' }]}
          />
        </div>
      ))}
    </Notice>
  );
}
