import { useMemo, type ReactNode } from 'react';
import { useFormContext } from 'react-hook-form';
import type { LonLat } from '../../../../shared/schemas/basics';
import { Section } from '../../../components/page';
import { boundsOf, isDrawable } from '../model/place';
import { readRings, writeRings } from '../model/text-rows';
import { CheckField, FieldGrid, LongTextField, NumberField, SelectField, useValue } from './bound-fields';
import { CurrentFields } from './current-fields';
import { EntryMap } from './entry-map';
import { RowsTextField } from './rows-text-field';
import { NotesSection } from './notes-section';

const mixings = [
  { value: 'okubo', label: 'Growing with the age of the cloud, after Okubo 1971' },
  { value: 'growing', label: 'Growing with the size of the cloud' },
  { value: 'constant', label: 'Constant coefficients' },
];
const emptyMixing: Record<string, Record<string, unknown>> = {
  okubo: { kind: 'okubo', varianceFactor: 1 },
  growing: { kind: 'growing', law: 'lake', coefficient: null, mostM2s: null },
  constant: { kind: 'constant', alongM2s: null, acrossM2s: null, turnsWithCurrent: true, axisTowardDeg: 0 },
};
const growthLaws = [
  { value: 'four-thirds', label: 'Power 4/3, open coast (Richardson 1926)' },
  { value: 'okubo', label: 'Power 1.15, sea (Okubo 1971)' },
  { value: 'lake', label: 'Power 1.1, lakes (Lawrence et al. 1995)' },
];
const noReaches: never[] = [];

const ringWords = (rings: LonLat[][]): string =>
  rings.length === 0 ? 'not drawn' : `${rings[0]!.length} positions${rings.length > 1 ? `, ${rings.length - 1} ${rings.length === 2 ? 'island' : 'islands'}` : ''}`;

export function OpenWaterFields({ kindField }: { kindField: ReactNode }) {
  const rings = useValue<LonLat[][] | undefined>('data.area');
  const drawable = useMemo(() => (rings ?? []).filter(isDrawable), [rings]);
  return (
    <>
      <Section title="Outline and depth">
        <div className="grid gap-x-8 gap-y-4 pt-4 lg:grid-cols-2">
          <FieldGrid className="content-start pt-0! lg:grid-cols-2!">
            {kindField}
            <NumberField name="data.depthM" label="Mean depth" unit="m" range="Above 0, at most 12,000." />
            <NumberField name="data.mixingDepthM" label="Mixing depth" unit="m" hint="Over which a substance is taken as mixed." range="Above 0, at most the mean depth." />
            <RowsTextField<LonLat[][]>
              name="data.area" label="Outline" className="sm:col-span-2" read={readRings} write={writeRings} summary={ringWords}
              hint={`One "longitude, latitude" a line; an empty line before each island. A GeoJSON polygon can be pasted as well. Now ${ringWords(rings ?? [])}.`}
            />
            <LongTextField name="data.tide" label="Tide" isOptional className="sm:col-span-2" />
          </FieldGrid>
          <EntryMap label="Map of the outline" reaches={noReaches} area={drawable} mark={null} fitTo={boundsOf(drawable.flat())} />
        </div>
      </Section>
      <Section title="Currents" note="named states; the first is the usual one">
        <CurrentFields />
      </Section>
      <Section title="Mixing">
        <MixingFields />
      </Section>
      <NotesSection />
    </>
  );
}

function MixingFields() {
  const { setValue } = useFormContext();
  const kind = useValue<string>('data.mixing.kind');
  const turns = useValue<boolean | undefined>('data.mixing.turnsWithCurrent');
  return (
    <FieldGrid>
      <SelectField name="data.mixing.kind" label="Spreading" choices={mixings} onChosen={(next) => setValue('data.mixing', emptyMixing[next ?? 'okubo'], { shouldDirty: true })} />
      {kind === 'okubo' && <NumberField name="data.mixing.varianceFactor" label="Factor on the variance" range="Above 0, at most 100; 1 is Okubo's own." />}
      {kind === 'growing' && (
        <>
          <SelectField name="data.mixing.law" label="Law of growth" choices={growthLaws} />
          <NumberField name="data.mixing.mostM2s" label="At most" unit="m²/s" isOptional range="Above 0, at most 100,000." />
        </>
      )}
      {kind === 'constant' && (
        <>
          <NumberField name="data.mixing.alongM2s" label="Mixing along" unit="m²/s" range="Above 0, at most 100,000." />
          <NumberField name="data.mixing.acrossM2s" label="Mixing across" unit="m²/s" range="Above 0, at most 100,000." />
          <CheckField name="data.mixing.turnsWithCurrent" label="Along follows the current" readWords={['yes', 'no']} />
          {turns === false && <NumberField name="data.mixing.axisTowardDeg" label="Along points toward" unit="° true" range="0 to 360." />}
        </>
      )}
      <CheckField name="data.calibrated" label="Calibrated by a dye test or records" readWords={['yes', 'no']} />
    </FieldGrid>
  );
}
