import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import { isoWithOffset } from '../../../shared/civil';
import type { RegisterHistoryEntry, RegisterItem, RegisterList, RegisterListQuery, RegisterName, RegisterVersion, registerCheckedSchema, registerMoveSchema, registerUpdateSchema, registerWriteSchema } from '../../../shared/schemas/registers';
import type { RegisterItemRow } from '../../db/entities/register.entities';
import type { Deps } from '../../deps';
import { AppError } from '../../http/problems';
import type { Actor } from '../../http/routes';
import { changesBetween } from '../../../shared/register-changes';
import { contentOf, slugBase, slugOf } from './register-content';
import { RegisterReferences } from './register-references';
import { searchHeadings } from './register-search';
import { isStale, presentHistory, presentItem, presentVersion } from './register.presenter';
import { RegisterRepository } from './register.repository';

type Write = z.output<ReturnType<typeof registerWriteSchema>>;
type Update = z.output<ReturnType<typeof registerUpdateSchema>>;
type Move = z.output<typeof registerMoveSchema>;
export type RegisterImport = Pick<RegisterItemRow, 'id' | 'code' | 'name' | 'ownerName' | 'lastCheckedOn' | 'data'>;
type Change = { action: string; reason: string; version: number };

const words: Record<RegisterName, string> = { waters: 'water', receptors: 'receptor', sources: 'source', substances: 'substance', stations: 'station' };
const MOST_PATHS_IN_AUDIT = 20;

export class RegisterService {
  private readonly repository: RegisterRepository;
  private readonly references: RegisterReferences;

  constructor(private readonly deps: Deps) {
    this.repository = new RegisterRepository(deps.db);
    this.references = new RegisterReferences(this.repository);
  }

  async list(actor: Actor, register: RegisterName, query: RegisterListQuery): Promise<RegisterList> {
    const now = this.deps.now();
    const headings = await this.repository.headings(register);
    const stale = (heading: { lastCheckedOn: string | null }) => isStale({ register, lastCheckedOn: heading.lastCheckedOn }, now);
    const found = searchHeadings(headings, query, stale);
    const ids = found.slice((query.page - 1) * query.pageSize, query.page * query.pageSize).map(({ id }) => id);
    return {
      items: (await this.repository.byIds(ids)).map((row) => presentItem(row, actor, now)),
      total: found.length,
      page: query.page,
      pageSize: query.pageSize,
      staleCount: headings.filter((heading) => !heading.isArchived && stale(heading)).length,
    };
  }

  async get(actor: Actor, register: RegisterName, id: string): Promise<RegisterItem> {
    return presentItem(await this.getRow(register, id), actor, this.deps.now());
  }

  async create(actor: Actor, register: RegisterName, input: Write): Promise<RegisterItem> {
    const { reason, ...content } = input;
    this.assertNotAhead(content.lastCheckedOn);
    const row = await this.deps.db.write(async (tx) => {
      await this.assertCodeFree(register, content.code);
      await this.references.check({ register, data: content.data });
      const id = slugOf(content.code, await this.repository.takenIds(slugBase(content.code)));
      const made: RegisterItemRow = { id, register, ...content, version: 1, isArchived: false, ...this.stamp(actor) };
      await this.repository.insert(tx, made);
      await this.record(tx, actor, made, { action: 'register.create', reason, changed: [] });
      return made;
    });
    return this.announced(actor, row);
  }

  /** Takes in entries that bring their ids, each held to the same rules, all or none. */
  async importAll(actor: Actor, register: RegisterName, entries: readonly RegisterImport[]): Promise<void> {
    await this.deps.db.write(async (tx) => {
      for (const { id, code, name, ownerName, lastCheckedOn, data } of entries) {
        await this.assertCodeFree(register, code);
        await this.references.check({ register, data });
        const row: RegisterItemRow = { id, register, code, name, ownerName, lastCheckedOn, data, version: 1, isArchived: false, ...this.stamp(actor) };
        await this.repository.insert(tx, row);
        await this.record(tx, actor, row, { action: 'register.create', reason: 'Taken in when the product was set up', changed: [] });
      }
    });
  }

  update(actor: Actor, register: RegisterName, id: string, input: Update): Promise<RegisterItem> {
    const { version, reason, ...content } = input;
    this.assertNotAhead(content.lastCheckedOn);
    return this.change(actor, register, id, { action: 'register.update', version, reason }, async (before) => {
      if (before.code !== content.code) await this.assertCodeFree(register, content.code, id);
      const after = { ...before, ...content };
      if (!before.isArchived) await this.references.check(after);
      return after;
    });
  }

  /** Somebody has looked at the entry and found it right. */
  markChecked(actor: Actor, register: RegisterName, id: string, { version, on, reason }: z.output<typeof registerCheckedSchema>): Promise<RegisterItem> {
    const lastCheckedOn = on ?? this.today();
    this.assertNotAhead(lastCheckedOn, 'on');
    return this.change(actor, register, id, { action: 'register.check', version, reason }, async (before) => ({ ...before, lastCheckedOn }));
  }

  archive(actor: Actor, register: RegisterName, id: string, { version, reason }: Move): Promise<RegisterItem> {
    return this.change(actor, register, id, { action: 'register.archive', version, reason }, async (before) => {
      if (before.isArchived) throw new AppError('wrong-state', `${before.code} is archived already`);
      const dependents = await this.references.dependentsOf(register, id);
      if (dependents.length > 0) throw new AppError('wrong-state', `${codesOf(dependents)} still ${dependents.length === 1 ? 'refers' : 'refer'} to ${before.name}: move or archive ${dependents.length === 1 ? 'it' : 'them'} first`);
      return { ...before, isArchived: true };
    });
  }

  restore(actor: Actor, register: RegisterName, id: string, { version, reason }: Move): Promise<RegisterItem> {
    return this.change(actor, register, id, { action: 'register.restore', version, reason }, async (before) => {
      if (!before.isArchived) throw new AppError('wrong-state', `${before.code} is in use already`);
      await this.references.check(before);
      return { ...before, isArchived: false };
    });
  }

  async history(register: RegisterName, id: string): Promise<RegisterHistoryEntry[]> {
    await this.getRow(register, id);
    return presentHistory(await this.repository.versions(id));
  }

  async version(register: RegisterName, id: string, number: number): Promise<RegisterVersion> {
    const item = await this.getRow(register, id);
    const row = await this.repository.findVersion(id, number);
    if (!row) throw new AppError('not-found', `${item.code} has no version ${number}: versions run from 1 to ${item.version}`);
    return presentVersion(row);
  }

  private async change(actor: Actor, register: RegisterName, id: string, { action, version, reason }: Change, make: (before: RegisterItemRow) => Promise<RegisterItemRow>): Promise<RegisterItem> {
    const outcome = await this.deps.db.write(async (tx) => {
      const before = await this.getRow(register, id);
      if (before.version !== version) throw this.stale(actor, before, version);
      const after = await make(before);
      const changes = changesBetween(contentOf(before), contentOf(after));
      if (changes.length === 0) return { row: before, isChanged: false };
      await this.references.checkDependents(after);
      const row: RegisterItemRow = { ...after, version: version + 1, ...this.stamp(actor) };
      if (!(await this.repository.update(tx, row, version))) throw this.stale(actor, before, version);
      await this.record(tx, actor, row, { action, reason, changed: changes.map(({ path }) => path) });
      return { row, isChanged: true };
    });
    return outcome.isChanged ? this.announced(actor, outcome.row) : presentItem(outcome.row, actor, this.deps.now());
  }

  private async record(tx: EntityManager, actor: Actor, row: RegisterItemRow, { action, reason, changed }: { action: string; reason: string; changed: string[] }): Promise<void> {
    await this.repository.addVersion(tx, { itemId: row.id, version: row.version, at: row.updatedAt, by: row.updatedBy, reason, code: row.code, name: row.name, content: contentOf(row) });
    await this.deps.audit.record(tx, actor, action, { kind: 'register', id: row.id }, { register: row.register, code: row.code, version: row.version, reason, changed: changed.slice(0, MOST_PATHS_IN_AUDIT), changedCount: changed.length });
  }

  private announced(actor: Actor, row: RegisterItemRow): RegisterItem {
    this.deps.changes.announce({ topic: 'register', id: row.id, by: actor.name });
    return presentItem(row, actor, this.deps.now());
  }

  private async getRow(register: RegisterName, id: string): Promise<RegisterItemRow> {
    const row = await this.repository.find(register, id);
    if (!row) throw new AppError('not-found', `There is no ${words[register]} ${id}`);
    return row;
  }

  private async assertCodeFree(register: RegisterName, code: string, exceptId = ''): Promise<void> {
    const taken = await this.repository.findByCode(register, code);
    if (!taken || taken.id === exceptId) return;
    const message = `The code ${code} is taken by ${taken.name}${taken.isArchived ? ' (archived)' : ''}: choose another`;
    throw new AppError('duplicate', message, { errors: [{ path: 'code', message }] });
  }

  /** Today in the organisation's offset. */
  private today(): string {
    return isoWithOffset(this.deps.now().getTime(), this.deps.config.utcOffset).slice(0, 10);
  }

  private assertNotAhead(day: string | null, path = 'lastCheckedOn'): void {
    const today = this.today();
    if (day === null || day <= today) return;
    const message = `${day} is still to come: give today (${today}) or an earlier day`;
    throw new AppError('bad-input', `${path}: ${message}`, { errors: [{ path, message }] });
  }

  private stale(actor: Actor, current: RegisterItemRow, version: number): AppError {
    return new AppError('stale-version', `${current.updatedBy} has changed ${current.code} to version ${current.version} since you read version ${version}`, { current: presentItem(current, actor, this.deps.now()) });
  }

  private stamp(actor: Actor): { updatedAt: string; updatedBy: string } {
    return { updatedAt: this.deps.now().toISOString(), updatedBy: actor.name };
  }
}

const codesOf = (rows: readonly RegisterItemRow[]): string => rows.slice(0, 5).map(({ code }) => code).join(', ') + (rows.length > 5 ? ` and ${rows.length - 5} more` : '');
