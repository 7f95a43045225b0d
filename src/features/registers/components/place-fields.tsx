import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useFormContext } from 'react-hook-form';
import { formatPosition } from '../../../../shared/format';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { Reach } from '../../../../shared/schemas/estimate';
import { Button } from '../../../components/button';
import { FieldError } from '../../../components/field';
import { Section } from '../../../components/page';
import { registerChoicesQuery } from '../api';
import { ownMessageAt } from '../model/form-errors';
import { areaOf, around, boundsOf, type Channel, channelText, isPosition, positionAt, reachesOf, rounded, snapped, type WaterItem } from '../model/place';
import { choicesOf } from '../model/register-words';
import { FieldGrid, NumberField, Reading, SelectField, useValue } from './bound-fields';
import { EntryMap } from './entry-map';
import { useIsWriting } from './entry-mode';

const noWaters: WaterItem[] = [];
const banks = choicesOf({ left: 'Left, looking downstream', right: 'Right, looking downstream', mid: 'Mid-channel' }, ['left', 'right', 'mid']);
const rangeOf = (reach: Reach): string => `${reach.name} runs from km ${reach.centreline[0]![2]} down to km ${reach.centreline.at(-1)![2]}.`;

/** Where an entry stands: water, place on the river or position, and a map on which it can be pressed. */
export function PlaceFields({ note }: { note: string }) {
  const { setValue, formState } = useFormContext();
  const isWriting = useIsWriting();
  const { data: waters = noWaters } = useQuery(registerChoicesQuery('waters'));
  const waterId = useValue<string>('data.waterId');
  const channel = useValue<Channel | null>('data.channel');
  const position = useValue<unknown>('data.position');
  const [start] = useState({ waterId, position });
  const code = useValue<string>('code');
  const name = useValue<string>('name');
  const water = waters.find(({ id }) => id === waterId);
  const reaches = reachesOf(water);
  const reach = reaches.find(({ id }) => id === channel?.reachId);
  const area = areaOf(water);
  const change = (path: string, value: unknown) => setValue(path, value, { shouldDirty: true, shouldValidate: formState.isSubmitted });

  const chooseWater = (next: string) => {
    change('data.waterId', next);
    const river = reachesOf(waters.find(({ id }) => id === next));
    change('data.channel', river.length > 0 ? { reachId: river[0]!.id, chainageKm: null, bank: 'right' } : null);
  };
  const press = (at: LonLat) => {
    const snap = snapped(at, reaches);
    if (snap) change('data.channel', snap.channel);
    change('data.position', rounded(at));
  };
  // While writing, the view stays where it was: a map that jumps at each press cannot be pressed again.
  const seen = isWriting ? start : { waterId, position };
  const fitTo = isPosition(seen.position) && seen.waterId === waterId ? around(seen.position) : boundsOf(reaches.length > 0 ? reaches.flatMap(({ centreline }) => centreline) : area.flat());

  return (
    <Section title="Place" note={note}>
      <div className="grid gap-x-8 gap-y-4 pt-4 lg:grid-cols-2">
        <FieldGrid className="content-start pt-0! lg:grid-cols-2!">
          <SelectField name="data.waterId" label="Water" choices={waters.map((item) => ({ value: item.id, label: item.name }))} onChosen={(next) => chooseWater(next ?? '')} className="sm:col-span-2" />
          {isWriting && channel && reaches.length > 0 && (
            <>
              <SelectField name="data.channel.reachId" label="Reach" choices={reaches.map((item) => ({ value: item.id, label: item.name }))} className="sm:col-span-2" />
              <NumberField name="data.channel.chainageKm" label="Chainage" unit="km" step={0.1} range={reach ? rangeOf(reach) : ''} />
              <SelectField name="data.channel.bank" label="Bank" choices={banks} />
            </>
          )}
          {!isWriting && channel && <Reading label="On the river">{`${channelText(channel, reaches)}; ${reach?.name ?? channel.reachId}`}</Reading>}
          {!isWriting && <Reading label="Position">{isPosition(position) ? `${formatPosition(position, 'decimal')}\n${formatPosition(position, 'minutes')}` : ''}</Reading>}
          {isWriting && (
            <>
              <NumberField name="data.position.0" label="Longitude" unit="°" range="-180 to 180, west is negative." />
              <NumberField name="data.position.1" label="Latitude" unit="°" range="-85 to 85, south is negative." />
            </>
          )}
          {isWriting && <PlaceErrors />}
          {isWriting && reach && typeof channel?.chainageKm === 'number' && (
            <Button className="sm:col-span-2 justify-self-start" onClick={() => change('data.position', positionAt(reach, channel.chainageKm!))}>
              Put the position at this chainage
            </Button>
          )}
        </FieldGrid>
        <div>
          <EntryMap
            label={`Map of ${name || 'this entry'}`}
            reaches={reaches}
            area={area}
            mark={isPosition(position) ? { code, name, position } : null}
            fitTo={fitTo}
            onClick={isWriting ? press : undefined}
          />
          {isWriting && <p className="mt-1 text-note text-ink2">Press the map to set the position{reaches.length > 0 ? '; reach, chainage and bank follow' : ''}.</p>}
        </div>
      </div>
    </Section>
  );
}

/** What is wrong with the place as a whole rather than with one of its fields. */
function PlaceErrors() {
  const { formState } = useFormContext();
  const messages = ['data.channel', 'data.position'].flatMap((path) => ownMessageAt(formState.errors, path) ?? []);
  return messages.length === 0 ? null : (
    <div className="sm:col-span-2">
      {messages.map((message) => <FieldError key={message}>{message}</FieldError>)}
    </div>
  );
}
