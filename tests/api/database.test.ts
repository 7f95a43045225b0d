import { mkdtempSync, readFileSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { Database } from '../../server/db/database';
import { PersonEntity, type PersonRow } from '../../server/db/entities/person.entity';

let folder: string;
let db: Database;

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'downreach-db-'));
  db = await Database.open(join(folder, 'test.sqlite'));
});
afterEach(async () => {
  await db.close();
  rmSync(folder, { recursive: true, force: true });
});

const person = (id: string): PersonRow => ({ id, name: id, email: `${id}@example.org`, passwordHash: null, roles: ['planner'], phone: '', licenceNumber: '', isActive: true, lastSignInAt: null, createdAt: '2031-05-12T00:00:00Z', version: 1 });
const ids = async () => (await db.read.find(PersonEntity)).map(({ id }) => id).sort();

describe('the write queue', () => {
  it('loses nothing of 50 overlapping units of work, of which every fifth is rolled back', async () => {
    const outcomes = await Promise.allSettled(
      Array.from({ length: 50 }, (_none, i) =>
        db.write(async (tx) => {
          await tx.insert(PersonEntity, person(`p${i}-a`));
          await pause(i % 3);
          await tx.insert(PersonEntity, person(`p${i}-b`));
          if (i % 5 === 4) throw new Error(`unit ${i} is refused`);
        }),
      ),
    );
    const kept = Array.from({ length: 50 }, (_none, i) => i).filter((i) => i % 5 !== 4);
    expect(outcomes.filter(({ status }) => status === 'rejected')).toHaveLength(10);
    expect(await ids()).toEqual(kept.flatMap((i) => [`p${i}-a`, `p${i}-b`]).sort());
  });

  it('lets a counter be read and raised 50 times at once without a lost step', async () => {
    await db.write((tx) => tx.insert(PersonEntity, person('counter')));
    await Promise.all(
      Array.from({ length: 50 }, () =>
        db.write(async (tx) => {
          const { version } = await tx.findOneByOrFail(PersonEntity, { id: 'counter' });
          await pause(0);
          await tx.update(PersonEntity, { id: 'counter' }, { version: version + 1 });
        }),
      ),
    );
    expect((await db.read.findOneByOrFail(PersonEntity, { id: 'counter' })).version).toBe(51);
  });

  it('leaves nothing of a unit of work that fails half way', async () => {
    await expect(
      db.write(async (tx) => {
        await tx.insert(PersonEntity, person('first'));
        await tx.insert(PersonEntity, { ...person('second'), email: 'first@example.org' });
      }),
    ).rejects.toThrow(/UNIQUE/);
    expect(await ids()).toEqual([]);
  });

  it('goes on after a unit of work that failed', async () => {
    await db.write(async () => Promise.reject(new Error('refused'))).catch(() => undefined);
    await db.write((tx) => tx.insert(PersonEntity, person('later')));
    expect(await ids()).toEqual(['later']);
  });

  it('joins a nested unit of work, so that both stand or fall together', async () => {
    const nested = () => db.write((tx) => tx.insert(PersonEntity, person('inner')));
    await expect(
      db.write(async (tx) => {
        await tx.insert(PersonEntity, person('outer'));
        await nested();
        expect(await ids()).toEqual(['inner', 'outer']);
        throw new Error('the outer unit is refused');
      }),
    ).rejects.toThrow('refused');
    expect(await ids()).toEqual([]);
  });

  it('gives work that a transaction left running a transaction of its own', async () => {
    let late: Promise<unknown> = Promise.resolve();
    await expect(
      db.write(async (tx) => {
        await tx.insert(PersonEntity, person('gone'));
        late = pause(20).then(() => db.write((own) => own.insert(PersonEntity, person('late'))));
        throw new Error('refused');
      }),
    ).rejects.toThrow('refused');
    await late;
    expect(await ids()).toEqual(['late']);
  });
});

describe('reading', () => {
  it('shows committed rows only', async () => {
    let release: () => void = () => undefined;
    const held = new Promise<void>((resolve) => (release = resolve));
    const writing = db.write(async (tx) => {
      await tx.insert(PersonEntity, person('pending'));
      await held;
    });
    await pause(10);
    expect(await ids()).toEqual([]);
    release();
    await writing;
    expect(await ids()).toEqual(['pending']);
  });

  it('refuses to write: there is no way round the queue', async () => {
    await expect(db.read.insert(PersonEntity, person('sneaked'))).rejects.toThrow(/readonly/);
    await expect(db.read.transaction((tx) => tx.insert(PersonEntity, person('sneaked')))).rejects.toThrow(/readonly/);
    expect(await ids()).toEqual([]);
  });
});

describe('connections to the main database', () => {
  it('are opened by the database module alone', () => {
    const server = join(import.meta.dirname, '..', '..', 'server');
    const files = readdirSync(server, { recursive: true, encoding: 'utf8' }).filter((name) => name.endsWith('.ts') && !name.endsWith('.test.ts'));
    const opening = files.filter((name) => /new DataSource\(|createWriter\(/.test(readFileSync(join(server, name), 'utf8')));
    expect(opening.sort()).toEqual(['db/data-source.ts', 'db/database.ts']);
  });
});
