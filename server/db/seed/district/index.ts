import { registerDataSchemas, type RegisterName } from '../../../../shared/schemas/registers';
import { receptors } from './receptors';
import type { SeedItem, WrittenItem } from './seed-item';
import { sources } from './sources';
import { stations } from './stations';
import { substances } from './substances';
import { waters } from './waters';

const filled = <R extends RegisterName>(register: R, items: readonly WrittenItem<R>[]): SeedItem<R>[] =>
  items.map((item) => ({ ...item, data: registerDataSchemas[register].parse(item.data) as SeedItem<R>['data'] }));

/** The registers of the invented Orlavane District, each entry checked against its schema. */
export const districtRegisters: { [R in RegisterName]: SeedItem<R>[] } = {
  waters: filled('waters', waters),
  receptors: filled('receptors', receptors),
  sources: filled('sources', sources),
  substances: filled('substances', substances),
  stations: filled('stations', stations),
};
