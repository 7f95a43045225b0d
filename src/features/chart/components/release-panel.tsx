import { useState } from 'react';
import { amountOf } from '../../../../shared/amount';
import { formatAmount, formatDuration } from '../../../../shared/format';
import { amountSchema } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { SelectInput, TextArea, TextInput } from '../../../components/inputs';
import { InstantInput } from '../../../components/instant-input';
import { Notice } from '../../../components/notice';
import { parseCoordinates } from '../../../map/coordinates';
import { useChart, useErrorAt } from '../hooks/chart-context';
import type { Draft, DraftRelease } from '../model/draft';
import { changeRelease, chooseSource, placeRelease, removeRelease, type PlaceOutcome } from '../model/draft-actions';
import { channelWords } from '../model/place';
import { unitScales } from '../model/unit-scales';
import { AmountFields } from './amount-fields';
import { PlaceFields } from './place-fields';
import { SubstanceField } from './substance-field';
import { TimingFields } from './timing-fields';
import { UnitField } from './unit-fields';

/** The release, in the order in which a caller tells it: where, what, how much, when. */
export function ReleasePanel() {
  const { draft, change, offset, isReadOnly, setPlacing, placing } = useChart();
  const startError = useErrorAt('startAt');
  const isFirst = draft.releases.length === 0;
  return (
    <fieldset disabled={isReadOnly} className="contents">
      {isFirst && <FirstPlace />}
      <SubstanceField />
      {draft.releases.map((release, index) => (
        <ReleaseEditor key={release.id} release={release} index={index} isAlone={draft.releases.length === 1} />
      ))}
      <Field label="Began at (T0)" isGroup error={startError}>
        <InstantInput value={draft.startAt === '' ? null : draft.startAt} offset={offset} hasNow onChange={(iso) => change((now) => ({ ...now, startAt: iso ?? '' }), 'startAt')} />
      </Field>
      {!isFirst && (
        <Button kind="quiet" icon="add" className="self-start" aria-pressed={placing !== null && placing.moveId === null} onClick={() => setPlacing(placing && placing.moveId === null ? null : { moveId: null })}>
          {placing && placing.moveId === null ? 'Click the map for the further release' : 'Add a further release'}
        </Button>
      )}
    </fieldset>
  );
}

/** No release yet: click the map, or one of the two ways without it. */
function FirstPlace() {
  const { draft, change, registers, selectRelease } = useChart();
  const [typed, setTyped] = useState('');
  const [refused, setRefused] = useState<string | null>(null);
  const take = (outcome: PlaceOutcome) => {
    if (!('draft' in outcome)) return setRefused(outcome.refused);
    change(() => outcome.draft);
    selectRelease(outcome.releaseId);
  };
  const go = () => {
    const read = parseCoordinates(typed);
    if (!read.ok) return setRefused(read.message);
    take(placeRelease(draft, read.position, registers));
  };
  const sources = registers.sources.filter((source) => !source.isArchived);
  return (
    <>
      <Notice title="Where did it get into the water?">Click the map at the place. Water, flow and receptors fill themselves in.</Notice>
      {sources.length > 0 && (
        <Field label="Or at a registered source">
          <SelectInput
            value=""
            onChange={(event) => {
              const source = sources.find((one) => one.id === event.target.value);
              if (source) take(chooseSource(draft, source, registers));
            }}
          >
            <option value="">Choose a source</option>
            {sources.map((source) => (
              <option key={source.id} value={source.id}>
                {source.code} {source.name}
              </option>
            ))}
          </SelectInput>
        </Field>
      )}
      <Field label="Or at coordinates" error={refused ?? undefined} hint="Latitude, longitude in any usual form, or UTM">
        <div className="flex gap-2">
          <TextInput
            value={typed}
            placeholder="-44.4307, -116.7321"
            onChange={(event) => setTyped(event.target.value)}
            onKeyDown={(event) => {
              if (event.key === 'Enter') go();
            }}
          />
          <Button className="whitespace-nowrap" onClick={go}>Place it</Button>
        </div>
      </Field>
    </>
  );
}

function ReleaseEditor({ release, index, isAlone }: { release: DraftRelease; index: number; isAlone: boolean }) {
  const { draft, change, selectedReleaseId, selectRelease } = useChart();
  const isOpen = isAlone || selectedReleaseId === release.id;
  const evidenceError = useErrorAt(`releases.${index}.evidence`);
  const radiusError = useErrorAt(`releases.${index}.initialRadiusM`);
  const set = (patch: Partial<DraftRelease>, field: string) => change((now) => changeRelease(now, release.id, (one) => ({ ...one, ...patch })), `${release.id}.${field}`);
  return (
    <section aria-label={release.name} className="flex flex-col gap-4 border-t border-rule pt-3">
      <div className="flex items-start justify-between gap-2">
        <button type="button" aria-expanded={isOpen} disabled={isAlone} onClick={() => selectRelease(isOpen ? null : release.id)} className="min-h-10 text-left">
          <span className="block font-semibold">{placeWords(draft, release)}</span>
          <span className="block text-note text-ink2">{releaseWords(draft, release)}</span>
        </button>
        <Button kind="quiet" icon="close" aria-label={`Remove ${release.name}`} onClick={() => change((now) => removeRelease(now, release.id))} />
      </div>
      {isOpen && (
        <>
          <AmountFields release={release} index={index} />
          <TimingFields release={release} index={index} />
          <details>
            <summary className="min-h-9 py-1 font-semibold text-kingfisher">Place, size, name, evidence</summary>
            <div className="flex flex-col gap-4 pt-2">
              <PlaceFields release={release} index={index} />
              <Field label="Name">
                <TextInput value={release.name} onChange={(event) => set({ name: event.target.value }, 'name')} />
              </Field>
              <UnitField
                label="Radius at the start"
                scales={[{ unit: 'm', perUnit: 1 }]}
                value={release.initialRadiusM}
                error={radiusError}
                hint="0 is a point; a diffuser or a spread slick has a size"
                onChange={(initialRadiusM) => set({ initialRadiusM }, 'radius')}
              />
              <UnitField label="Volume spilled" isOptional scales={unitScales.volume} value={release.spilledVolumeM3} hint="Caps what can be in the water at amount over volume" onChange={(spilledVolumeM3) => set({ spilledVolumeM3 }, 'volume')} />
              <Field label="Evidence: who said so, when, how sure" isOptional error={evidenceError}>
                <TextArea rows={3} value={release.evidence} onChange={(event) => set({ evidence: event.target.value }, 'evidence')} />
              </Field>
            </div>
          </details>
        </>
      )}
    </section>
  );
}

export function placeWords(draft: Draft, release: DraftRelease): string {
  const reach = draft.water?.kind === 'river' ? draft.water.reaches.find((one) => one.id === release.channel?.reachId) : null;
  return reach && release.channel ? channelWords(reach, release.channel.chainageKm, release.channel.bank) : `in ${draft.water?.name ?? 'open water'}`;
}

/** "820 kg over 10 min" */
export function releaseWords(draft: Draft, release: DraftRelease): string {
  const parsed = amountSchema.safeParse(release.amount);
  const kg = parsed.success ? amountOf(parsed.data).likely : null;
  const amount = kg === null ? (release.amount.how === 'unknown' ? 'amount not known' : 'amount missing') : `${formatAmount(kg, draft.substance?.measure ?? 'mass').text} ${formatAmount(kg, draft.substance?.measure ?? 'mass').unit}`;
  const { timing } = release;
  const over = timing.kind === 'instantaneous' ? 'at once' : timing.kind === 'steady' ? (timing.durationS ? `over ${formatDuration(timing.durationS)}` : 'duration missing') : 'by a table of rates';
  return `${amount} ${over}`;
}
