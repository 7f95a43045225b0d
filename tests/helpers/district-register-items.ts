import { districtRegisters } from '../../server/db/seed/district';
import type { RegisterItem, RegisterName } from '../../shared/schemas/registers';

/** Register entries of the demonstration district as the API answers them. */
export function districtItems<R extends RegisterName>(register: R): RegisterItem<R>[] {
  return districtRegisters[register].map((item) => ({
    ...item,
    register,
    isStale: false,
    version: 1,
    updatedAt: '2031-01-01T00:00:00Z',
    updatedBy: 'seed',
    isArchived: false,
    abilities: { update: true },
  }));
}
