import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { defineConfig } from '@playwright/test';

const root = fileURLToPath(new URL('../..', import.meta.url));
const port = Number(process.env.DOWNREACH_E2E_PORT ?? 9_090);
process.env.DOWNREACH_E2E_DATA ??= mkdtempSync(join(tmpdir(), 'downreach-e2e-'));

/** The real server with its demo district in a fresh folder, the built client, Debian's Chromium. */
export default defineConfig({
  testDir: '.',
  testMatch: '*.e2e.ts',
  outputDir: join(root, 'test-results', 'browser'),
  workers: 1,
  fullyParallel: false,
  forbidOnly: true,
  retries: 0,
  timeout: 90_000,
  expect: { timeout: 15_000 },
  reporter: [['list'], ['json', { outputFile: join(root, 'test-results', 'browser.json') }]],
  use: {
    baseURL: `http://127.0.0.1:${port}`,
    viewport: { width: 1440, height: 900 },
    trace: 'retain-on-failure',
    launchOptions: {
      executablePath: process.env.DOWNREACH_CHROMIUM ?? '/usr/bin/chromium',
      args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'],
    },
  },
  webServer: {
    command: 'exec node --import tsx server/main.ts',
    cwd: root,
    url: `http://127.0.0.1:${port}/api/health`,
    timeout: 180_000,
    reuseExistingServer: false,
    stdout: 'ignore',
    stderr: 'pipe',
    env: { PORT: String(port), DOWNREACH_DATA: process.env.DOWNREACH_E2E_DATA, DOWNREACH_DEMO: 'on', DOWNREACH_DEV: 'off', DOWNREACH_LOG: 'silent', SMTP_URL: '' },
  },
});
