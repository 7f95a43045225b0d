import type { IForbiddenRuleType } from 'dependency-cruiser';

const only = (name: string, comment: string, from: string, allowed: string, fromNot?: string): IForbiddenRuleType => ({
  name,
  comment,
  severity: 'error',
  from: { path: from, ...(fromNot ? { pathNot: fromNot } : {}) },
  to: { pathNot: allowed },
});

const tests = '\\.test\\.tsx?$';

/** Which folder may import which: the table of DEVELOPERS.md as rules. The list of exceptions only ever gets shorter. */
export const importRules: IForbiddenRuleType[] = [
  { name: 'no-cycles', severity: 'error', from: {}, to: { circular: true, viaOnly: { dependencyTypesNot: ['type-only'] } } },
  only('shared', 'shared imports zod and itself', '^shared/', '^shared/|^node_modules/zod/', tests),
  only('solver', 'the solver imports shared and itself', '^server/solver/', '^server/solver/|^shared/', `${tests}|^server/solver/kernels/build\\.mjs$`),
  only('workers', 'workers import the solver, shared and the pool library', '^server/workers/', '^server/(workers|solver)/|^shared/|^node_modules/piscina/|^(node:)?(worker_threads|url|path|fs)$', tests),
  { name: 'http-knows-no-features', severity: 'error', from: { path: '^server/(http|mail|pdf)/', pathNot: tests }, to: { path: '^server/(features|solver)/' } },
  { name: 'db-and-jobs-know-no-features', severity: 'error', from: { path: '^server/(db|jobs)/', pathNot: `${tests}|^server/db/seed/` }, to: { path: '^server/(features|http|solver)/' } },
  { name: 'typeorm-stays-in-repositories', severity: 'error', from: { path: '^server/', pathNot: `^server/(db|jobs|mail)/|\\.repository\\.ts$|${tests}` }, to: { path: '^node_modules/typeorm/', dependencyTypesNot: ['type-only'] } },
  { name: 'other-repositories', severity: 'error', from: { path: '^server/features/([^/]+)/' }, to: { path: '^server/features/[^/]+/[^/]+\\.repository\\.ts$', pathNot: '^server/features/$1/' } },
  { name: 'client-not-server', severity: 'error', from: { path: '^src/', pathNot: tests }, to: { path: '^(server|tiles|tests)/' } },
  { name: 'client-tests-not-server', severity: 'error', from: { path: `^src/.*${tests}` }, to: { path: '^(server|tiles)/' } },
  { name: 'server-not-client', severity: 'error', from: { path: '^(server|shared)/' }, to: { path: '^(src|tests)/' } },
  { name: 'parts-know-no-features', severity: 'error', from: { path: '^src/(components|lib|map)/' }, to: { path: '^src/(features|app)/' } },
  { name: 'features-do-not-mix', severity: 'error', from: { path: '^src/features/([^/]+)/' }, to: { path: '^src/(features/[^/]+|app)/', pathNot: '^src/features/$1/' } },
];
