import { allows, registerWriteActions } from '../../../shared/permissions';
import { type RegisterHistoryEntry, type RegisterItem, type RegisterVersion, staleAfterDays } from '../../../shared/schemas/registers';
import type { RegisterItemRow, RegisterVersionRow } from '../../db/entities/register.entities';
import type { Actor } from '../../http/routes';
import type { RegisterContent } from './register-content';
import { changesBetween } from '../../../shared/register-changes';

const DAY_MS = 86_400_000;

/** Not checked within the age set for its register, or never. */
export function isStale(item: Pick<RegisterItemRow, 'register' | 'lastCheckedOn'>, now: Date): boolean {
  if (item.lastCheckedOn === null) return true;
  return item.lastCheckedOn < new Date(now.getTime() - staleAfterDays[item.register] * DAY_MS).toISOString().slice(0, 10);
}

export const presentItem = (row: RegisterItemRow, actor: Actor, now: Date): RegisterItem => ({
  id: row.id,
  register: row.register,
  code: row.code,
  name: row.name,
  ownerName: row.ownerName,
  lastCheckedOn: row.lastCheckedOn,
  isStale: isStale(row, now),
  version: row.version,
  updatedAt: row.updatedAt,
  updatedBy: row.updatedBy,
  isArchived: row.isArchived,
  data: row.data,
  abilities: { update: allows(actor.roles, registerWriteActions[row.register]) },
});

const contentOf = (row: RegisterVersionRow): RegisterContent => row.content as RegisterContent;

/** The newest first; each entry says what differs from the one before it. */
export const presentHistory = (versions: readonly RegisterVersionRow[]): RegisterHistoryEntry[] =>
  versions
    .map((row, i): RegisterHistoryEntry => {
      const before = versions[i - 1];
      const changes = before ? changesBetween(contentOf(before), contentOf(row)) : [];
      return { version: row.version, at: row.at, by: row.by, reason: row.reason, name: row.name, code: row.code, changedPaths: changes.map(({ path }) => path), changes };
    })
    .reverse();

export const presentVersion = (row: RegisterVersionRow): RegisterVersion => {
  const { ownerName, lastCheckedOn, isArchived, data } = contentOf(row);
  return { version: row.version, at: row.at, by: row.by, reason: row.reason, code: row.code, name: row.name, ownerName, lastCheckedOn, isArchived, data };
};
