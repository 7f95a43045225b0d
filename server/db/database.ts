import { AsyncLocalStorage } from 'node:async_hooks';
import { DataSource, type EntityManager } from 'typeorm';
import { entities } from './entities';
import { migrations } from './migrations';

/** One transaction while it is open. What it started and left running must not fall into it afterwards. */
type Unit = { tx: EntityManager; isOpen: boolean };

/**
 * One writer behind a queue, one read-only reader. better-sqlite3 has a single connection per DataSource, so
 * overlapping transactions on it would mix; every unit of work therefore waits its turn.
 */
export class Database {
  private tail: Promise<unknown> = Promise.resolve();
  private readonly current = new AsyncLocalStorage<Unit>();

  private constructor(
    private readonly writer: DataSource,
    private readonly reader: DataSource,
  ) {}

  static async open(file: string): Promise<Database> {
    const writer = await createWriter(file).initialize();
    await writer.runMigrations({ transaction: 'each' });
    const reader = await new DataSource({ type: 'better-sqlite3', database: file, entities, readonly: true }).initialize();
    return new Database(writer, reader);
  }

  /** Runs `work` alone in one transaction. Inside it only the database is awaited. A nested call joins. */
  write<T>(work: (tx: EntityManager) => Promise<T>): Promise<T> {
    const outer = this.openUnit();
    if (outer) return work(outer.tx);
    const run = this.tail.then(() => this.transact(work));
    this.tail = run.catch(() => undefined);
    return run;
  }

  private transact<T>(work: (tx: EntityManager) => Promise<T>): Promise<T> {
    return this.writer.transaction((tx) => {
      const unit: Unit = { tx, isOpen: true };
      // Closed before the commit: what comes later must not join a transaction that is being ended.
      return this.current.run(unit, () => work(tx).finally(() => (unit.isOpen = false)));
    });
  }

  /** Manager for reading: the open transaction inside `write`, committed rows elsewhere. */
  get read(): EntityManager {
    return this.openUnit()?.tx ?? this.reader.manager;
  }

  private openUnit(): Unit | undefined {
    const unit = this.current.getStore();
    return unit?.isOpen ? unit : undefined;
  }

  async close(): Promise<void> {
    await this.tail;
    await this.reader.destroy();
    await this.writer.destroy();
  }
}

export const createWriter = (file: string): DataSource =>
  new DataSource({
    type: 'better-sqlite3',
    database: file,
    entities,
    migrations,
    enableWAL: true,
    timeout: 5_000,
    prepareDatabase: (db: { pragma: (text: string) => unknown }) => {
      db.pragma('page_size = 16384');
      db.pragma('synchronous = NORMAL');
    },
  });
