import { useFormContext } from 'react-hook-form';
import { emptyOpenWater, emptyRiver } from '../model/empty-entry';
import { choicesOf, kindWords } from '../model/register-words';
import { SelectField, useValue } from './bound-fields';
import { OpenWaterFields } from './open-water-fields';
import { RiverFields } from './river-fields';

const openKinds = ['lake', 'harbour', 'estuary', 'coast'];

export function WaterFields({ isNew }: { isNew: boolean }) {
  const { setValue } = useFormContext();
  const kind = useValue<string>('data.kind');
  const choose = (next: string) => {
    if (next === kind) return;
    if (next === 'river' || kind === 'river') setValue('data', next === 'river' ? emptyRiver() : emptyOpenWater(next), { shouldDirty: true });
    else setValue('data.kind', next, { shouldDirty: true });
  };
  // A river has reaches, an open water an outline: an entry in use keeps to what it is.
  const kinds = isNew ? ['river', ...openKinds] : kind === 'river' ? ['river'] : openKinds;
  const kindField = <SelectField name="data.kind" label="Kind" choices={choicesOf(kindWords, kinds)} onChosen={(next) => choose(next ?? 'river')} />;
  return kind === 'river' ? <RiverFields kindField={kindField} /> : <OpenWaterFields kindField={kindField} />;
}
