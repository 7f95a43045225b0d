import { useState } from 'react';
import { isRiver } from '../../../../shared/assemble';
import { formatPosition } from '../../../../shared/format';
import type { Bank } from '../../../../shared/schemas/basics';
import { Button } from '../../../components/button';
import { Field } from '../../../components/field';
import { SelectInput, TextInput } from '../../../components/inputs';
import { NumberInput } from '../../../components/number-input';
import { parseCoordinates } from '../../../map/coordinates';
import { useChart, useErrorAt } from '../hooks/chart-context';
import type { DraftRelease } from '../model/draft';
import { changeRelease, placeRelease, waterItem } from '../model/draft-actions';
import { onBank } from '../model/place';

/** Where a release is: chainage and bank on a river, coordinates anywhere; all that the map can do, typed. */
export function PlaceFields({ release, index }: { release: DraftRelease; index: number }) {
  const { draft, change, registers, placing, setPlacing } = useChart();
  const [typed, setTyped] = useState('');
  const [refused, setRefused] = useState<string | null>(null);
  const go = () => {
    const read = parseCoordinates(typed);
    if (!read.ok) return setRefused(read.message);
    const outcome = placeRelease(draft, read.position, registers, release.id);
    if (!('draft' in outcome)) return setRefused(outcome.refused);
    change(() => outcome.draft);
    setTyped('');
    setRefused(null);
  };
  const isWaiting = placing?.moveId === release.id;
  return (
    <>
      {release.channel && <ChannelFields release={release} index={index} />}
      <Field label="Move to coordinates" error={refused ?? undefined} hint={`Now ${formatPosition(release.position, 'decimal')}`}>
        <div className="flex gap-2">
          <TextInput
            value={typed}
            placeholder="-44.4307, -116.7321"
            onChange={(event) => setTyped(event.target.value)}
            onKeyDown={(event) => {
              if (event.key === 'Enter') go();
            }}
          />
          <Button onClick={go}>Move</Button>
        </div>
      </Field>
      <Button kind="quiet" icon="pin" aria-pressed={isWaiting} className="self-start" onClick={() => setPlacing(isWaiting ? null : { moveId: release.id })}>
        {isWaiting ? 'Now click the map' : 'Move by a click on the map'}
      </Button>
    </>
  );
}

function ChannelFields({ release, index }: { release: DraftRelease; index: number }) {
  const { draft, change, registers } = useChart();
  const error = useErrorAt(`releases.${index}.channel`);
  const { channel } = release;
  const item = waterItem(draft, registers);
  const reaches = draft.water?.kind === 'river' ? draft.water.reaches : item && isRiver(item.data) ? item.data.reaches : [];
  const reach = reaches.find((one) => one.id === channel?.reachId);
  if (!channel || !reach) return null;
  const set = (next: Partial<typeof channel>) =>
    change((now) => changeRelease(now, release.id, (one) => {
      const moved = { ...channel, ...next };
      return { ...one, channel: moved, position: onBank(reaches.find((candidate) => candidate.id === moved.reachId) ?? reach, moved.chainageKm, moved.bank) };
    }), `${release.id}.channel`);
  const top = reach.centreline[0]![2];
  const bottom = reach.centreline[reach.centreline.length - 1]![2];
  return (
    <div className="grid grid-cols-2 gap-3">
      <Field label="Reach" className="col-span-2">
        <SelectInput
          value={reach.id}
          onChange={(event) => {
            const next = reaches.find((one) => one.id === event.target.value);
            if (next) set({ reachId: next.id, chainageKm: next.centreline[0]![2] });
          }}
        >
          {reaches.map((one) => (
            <option key={one.id} value={one.id}>
              {one.name}
            </option>
          ))}
        </SelectInput>
      </Field>
      <Field label={`Chainage ${reach.chainagePrefix}`} unit="km" error={error} hint={`${top} down to ${bottom}`}>
        <NumberInput value={channel.chainageKm} step={0.1} min={bottom} max={top} onChange={(km) => km !== null && set({ chainageKm: km })} />
      </Field>
      <Field label="Bank, looking downstream">
        <SelectInput value={channel.bank} onChange={(event) => set({ bank: event.target.value as Bank })}>
          <option value="left">left</option>
          <option value="right">right</option>
          <option value="mid">mid-channel</option>
        </SelectInput>
      </Field>
    </div>
  );
}
