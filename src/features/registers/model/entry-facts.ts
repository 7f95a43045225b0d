import type { RegisterData, RegisterItem, RegisterName } from '../../../../shared/schemas/registers';
import { formatEntered } from '../../../../shared/format';
import { kindWords, wordOf } from './register-words';
import { placeText, type WaterItem } from './place';

const counted = (n: number, one: string, many = `${one}s`): string => `${n} ${n === 1 ? one : many}`;
const joined = (...parts: (string | false | null)[]): string => parts.filter(Boolean).join('; ');

type Facts<R extends RegisterName> = (data: RegisterData[R], waters: readonly WaterItem[]) => string;

/** What a register says of an entry in one line. */
const factsOf: { [R in RegisterName]: Facts<R> } = {
  waters: (data) =>
    data.kind === 'river'
      ? joined('River', counted(data.reaches.length, 'reach', 'reaches'), `flows ${data.flowNames.join(', ')}`)
      : joined(wordOf(kindWords, data.kind), `${formatEntered(data.depthM)} m deep`, data.currents.length > 0 && counted(data.currents.length, 'state of the current', 'states of the current')),
  receptors: (data, waters) => joined(wordOf(kindWords, data.kind), placeText(data, waters), data.closingMinutes !== null && `closes in ${formatEntered(data.closingMinutes)} min`, data.storageHours !== null && `${formatEntered(data.storageHours)} h storage`),
  sources: (data, waters) => joined(wordOf(kindWords, data.kind), placeText(data, waters), data.holdings.length > 0 && counted(data.holdings.length, 'substance')),
  substances: (data) => joined(data.cas !== '' && `CAS ${data.cas}`, data.measure === 'count' ? 'counted' : 'weighed', data.basis !== '' && data.basis, counted(data.publishedValues.length, 'published value')),
  stations: (data, waters) => joined(wordOf(kindWords, data.kind), placeText(data, waters)),
};

export const entryFacts = <R extends RegisterName>(item: RegisterItem<R>, waters: readonly WaterItem[]): string => factsOf[item.register](item.data, waters);
