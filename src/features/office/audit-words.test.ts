import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { auditLines, auditWord, auditWords } from './audit-words';

const sources = (folder: string): string[] =>
  readdirSync(folder, { withFileTypes: true, recursive: true }).filter((entry) => entry.isFile() && entry.name.endsWith('.ts') && !/\.(test|repository)\./.test(entry.name)).map((entry) => readFileSync(join(entry.parentPath, entry.name), 'utf8'));

it('every action that the server records has words', () => {
  const recorded = new Set(sources('server/features').flatMap((text) => [...text.matchAll(/'((?:session|person|register|incident|scenario|revision|run|mail)\.[a-z-]+)'/g)].map(([, action]) => action!)));
  expect(recorded.size).toBeGreaterThan(20);
  expect([...recorded].filter((action) => !(action in auditWords))).toEqual([]);
});

it('an action without words is still readable', () => {
  expect(auditWord('weather.take-over')).toBe('weather take over');
});

it('ids are left out and hashes shortened', () => {
  expect(auditLines({ scenarioId: 's1', number: 3, documentHash: 'ab'.repeat(32), changed: [] })).toEqual(['number: 3', 'document hash: abababababab…']);
});

it('particulars are said line by line, changes with old and new', () => {
  expect(auditLines({ name: 'Ada', changed: { roles: { from: ['planner'], to: ['engineer', 'supervisor'] }, isActive: { from: true, to: false }, phone: { from: '', to: '112' } } })).toEqual([
    'name: Ada',
    'roles: planner, now engineer, supervisor',
    'is active: yes, now no',
    'phone: nothing, now 112',
  ]);
});
