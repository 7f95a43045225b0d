import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { estimateResultSchema } from '../../shared/schemas/estimate-result';
import { estimateDocumentSchema } from '../../shared/schemas/estimate';
import { solve } from './documents';

const root = fileURLToPath(new URL('../..', import.meta.url));
const river = readFileSync(new URL('../fixtures/documents/s01-river.json', import.meta.url), 'utf8');
const run = (args: string[], input = '') => spawnSync(process.execPath, ['--import', 'tsx', 'server/estimate-cli.ts', ...args], { cwd: root, input, encoding: 'utf8', maxBuffer: 1e8 });

describe('the estimate command', () => {
  it('prints one JSON result, the same as the solver gives', () => {
    const { stdout, status } = run(['tests/fixtures/documents/s01-river.json']);
    expect(status).toBe(0);
    expect(estimateResultSchema.parse(JSON.parse(stdout))).toEqual(JSON.parse(JSON.stringify(solve(estimateDocumentSchema.parse(JSON.parse(river))).result)));
  });

  it('reads standard input and adds decoded frames when asked', () => {
    const { stdout, status } = run(['--frames', '--preview', '-'], JSON.stringify({ ...JSON.parse(river), frameCount: 4 }));
    const result = JSON.parse(stdout) as { frames: { timeS: number; values: number[] }[]; envelope: { values: number[] } };
    expect(status).toBe(0);
    expect(result.frames.map((frame) => frame.timeS)).toEqual([25_200, 50_400, 75_600, 100_800]);
    expect(Math.max(...result.frames[1]!.values)).toBeGreaterThan(1e-3);
    expect(Math.max(...result.envelope.values)).toBeGreaterThan(Math.max(...result.frames[0]!.values));
  });

  it('names each bad field on standard error and ends with status 2', () => {
    const bad = JSON.parse(river) as { horizonS: number; water: { reaches: { hydraulics: { depthM: number }[] }[] } };
    bad.horizonS = -5;
    bad.water.reaches[0]!.hydraulics[0]!.depthM = 0;
    const { stdout, stderr, status } = run(['-'], JSON.stringify(bad));
    expect(status).toBe(2);
    expect(stdout).toBe('');
    expect(stderr).toMatch(/^horizonS: Must be above 0 s$/m);
    expect(stderr).toMatch(/^water\.reaches\.0\.hydraulics\.0\.depthM: Must be above 0 m$/m);
  });

  it('says what is wrong with a file that is missing or not JSON', () => {
    expect(run(['no-such-file.json'])).toMatchObject({ status: 2, stderr: expect.stringMatching(/^no-such-file\.json: Cannot be read/) as string });
    expect(run(['-'], '{')).toMatchObject({ status: 2, stderr: expect.stringMatching(/^standard input: This is not JSON/) as string });
  });

  it('explains itself', () => expect(run(['--help'])).toMatchObject({ status: 0, stdout: expect.stringMatching(/^Usage: npm run --silent estimate/) as string }));
});
