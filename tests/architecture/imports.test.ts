import { cruise } from 'dependency-cruiser';
import { describe, expect, it } from 'vitest';
import { importRules } from './import-rules';

const cruiseAll = async (folders: string[], rules = importRules) => {
  const { output } = await cruise(folders, { ruleSet: { forbidden: rules }, validate: true, tsPreCompilationDeps: true, tsConfig: { fileName: 'tsconfig.json' }, doNotFollow: { path: 'node_modules' } });
  if (typeof output === 'string') throw new Error(output);
  return output.summary;
};

describe('folders', () => {
  it('import only what the table allows', async () => {
    const summary = await cruiseAll(['src', 'server', 'shared', 'tiles']);
    expect(summary.totalCruised).toBeGreaterThan(100);
    expect(summary.violations.map((v) => `${v.rule.name}: ${v.from} -> ${v.to}`)).toEqual([]);
  }, 60_000);

  it('are caught by the rules when they reach where they may not', async () => {
    const summary = await cruiseAll(['server/features'], [{ name: 'probe', severity: 'error', from: { path: '^server/features/' }, to: { path: '^server/http/' } }]);
    expect(summary.violations.length).toBeGreaterThan(0);
  }, 60_000);
});
