import { assembleReceptors, assembleRelease, assembleSubstance, assembleWater, isRiver } from '../../../../shared/assemble';
import type { LonLat } from '../../../../shared/schemas/basics';
import type { RegisterItem } from '../../../../shared/schemas/registers';
import { amountForSubstance } from './amount-forms';
import { nextReleaseId, type Draft, type DraftRelease, type DraftWater } from './draft';
import { placeAt, type Place } from './place';

/** The register entries a draft is put together from. */
export type Registers = {
  waters: RegisterItem<'waters'>[];
  receptors: RegisterItem<'receptors'>[];
  sources: RegisterItem<'sources'>[];
  substances: RegisterItem<'substances'>[];
};

export const substanceItem = (draft: Draft, registers: Registers) => registers.substances.find((item) => item.id === draft.substance?.registerId) ?? null;
export const waterItem = (draft: Draft, registers: Registers) => registers.waters.find((item) => item.id === draft.water?.registerId) ?? null;

/** Puts the draft on a water: its usual flow or current, and every receptor on it. Keeps both when it is on it already. */
export function onWater(draft: Draft, water: RegisterItem<'waters'>, registers: Registers): Draft {
  if (draft.water?.registerId === water.id) return draft;
  return {
    ...draft,
    water: assembleWater(water) as DraftWater,
    currentName: isRiver(water.data) ? '' : (water.data.currents[0]?.name ?? ''),
    receptors: assembleReceptors(registers.receptors.filter((item) => !item.isArchived), water.id, draft.substance?.registerId ?? null),
    leftOut: [],
  };
}

const newRelease = (draft: Draft, place: Place): DraftRelease => ({
  id: nextReleaseId(draft.releases),
  name: draft.releases.length === 0 ? 'Release' : `Release ${draft.releases.length + 1}`,
  position: place.position,
  channel: place.channel,
  timing: { kind: 'instantaneous', atS: 0 },
  amount: draft.substance?.measure === 'count' ? { how: 'count', count: { low: null, likely: null, high: null } } : { how: 'mass', massKg: { low: null, likely: null, high: null }, activeFraction: 1 },
  initialRadiusM: 0,
  spilledVolumeM3: null,
  evidence: '',
});

export type PlaceOutcome = { draft: Draft; releaseId: string; words: string } | { refused: string; nearest: Place | null };

/** Adds a release, or moves the one named, to a position on the map. */
export function placeRelease(draft: Draft, position: LonLat, registers: Registers, moveId: string | null = null, nearM?: number): PlaceOutcome {
  const answer = placeAt(position, registers.waters, nearM);
  return answer.place ? placeReleaseAt(draft, answer.place, registers, moveId) : { refused: answer.why, nearest: answer.nearest };
}

export function placeReleaseAt(draft: Draft, place: Place, registers: Registers, moveId: string | null = null): PlaceOutcome {
  const others = draft.releases.filter((release) => release.id !== moveId);
  if (others.length > 0 && draft.water?.registerId !== place.water.id)
    return { refused: `This place is on ${place.water.name}; the other releases are on ${draft.water?.name ?? 'another water'}. An estimate covers one water: make a second scenario for ${place.water.name}`, nearest: null };
  const moved = draft.releases.find((release) => release.id === moveId);
  const release = moved ? { ...moved, position: place.position, channel: place.channel } : withSubstance(newRelease(draft, place), draft, registers);
  const releases = moved ? draft.releases.map((item) => (item.id === moveId ? release : item)) : [...draft.releases, release];
  return { draft: { ...onWater(draft, place.water, registers), releases }, releaseId: release.id, words: place.words };
}

function withSubstance(release: DraftRelease, draft: Draft, registers: Registers): DraftRelease {
  const item = substanceItem(draft, registers);
  return item ? { ...release, amount: amountForSubstance(release.amount, item.data) } : release;
}

/** A release at a registered source, with what the register knows: place, water, substance, largest credible amount. */
export function chooseSource(draft: Draft, source: RegisterItem<'sources'>, registers: Registers): PlaceOutcome {
  const water = registers.waters.find((item) => item.id === source.data.waterId);
  if (!water) return { refused: `${source.name} stands on a water that is not in the register: mend the source's entry`, nearest: null };
  const substance = registers.substances.find((item) => item.id === (draft.substance?.registerId ?? source.data.holdings[0]?.substanceId));
  const place: Place = { water, position: source.data.position, channel: source.data.channel, words: source.name };
  const withPlace = placeReleaseAt(substance && !draft.substance ? chooseSubstance(draft, substance, registers) : draft, place, registers);
  if (!('draft' in withPlace)) return withPlace;
  const { name, amount } = assembleRelease(source, substance?.id ?? null, withPlace.releaseId);
  return { ...withPlace, draft: changeRelease(withPlace.draft, withPlace.releaseId, (release) => ({ ...release, name, amount })) };
}

export function chooseSubstance(draft: Draft, substance: RegisterItem<'substances'>, registers: Registers): Draft {
  const onThisWater = registers.receptors.filter((item) => draft.receptors.some((receptor) => receptor.registerId === item.id));
  const fresh = new Map(onThisWater.map((item) => [item.id, assembleReceptors([item], item.data.waterId, substance.id)[0]!] as const));
  return {
    ...draft,
    substance: assembleSubstance(substance),
    releases: draft.releases.map((release) => ({ ...release, amount: amountForSubstance(release.amount, substance.data) })),
    receptors: draft.receptors.map((receptor) => ({ ...receptor, actionValues: fresh.get(receptor.registerId ?? '')?.actionValues ?? [] })),
  };
}

export const changeRelease = (draft: Draft, id: string, change: (release: DraftRelease) => DraftRelease): Draft => ({
  ...draft,
  releases: draft.releases.map((release) => (release.id === id ? change(release) : release)),
});

/** The last release takes the water and its receptors with it: the draft is as empty as before the first click. */
export function removeRelease(draft: Draft, id: string): Draft {
  const releases = draft.releases.filter((release) => release.id !== id);
  return releases.length > 0 ? { ...draft, releases } : { ...draft, releases, water: null, receptors: [], leftOut: [], currentName: '' };
}

export function chooseFlow(draft: Draft, flowName: string): Draft {
  return draft.water?.kind === 'river' ? { ...draft, water: { ...draft.water, flow: { name: flowName, discharges: [], source: '', readAt: null } } } : draft;
}

export function chooseCurrent(draft: Draft, currentName: string, registers: Registers): Draft {
  const item = waterItem(draft, registers);
  if (draft.water?.kind !== 'open' || !item || isRiver(item.data)) return draft;
  const state = item.data.currents.find((current) => current.name === currentName);
  return state ? { ...draft, currentName, water: { ...draft.water, current: state.parts } } : draft;
}

export function tickReceptor(draft: Draft, id: string, isTicked: boolean): Draft {
  return { ...draft, leftOut: isTicked ? draft.leftOut.filter((other) => other !== id) : [...new Set([...draft.leftOut, id])] };
}
