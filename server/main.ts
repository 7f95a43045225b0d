import { createServer } from 'node:http';
import { join } from 'node:path';
import type { AddressInfo } from 'node:net';
import { fileURLToPath } from 'node:url';
import type { RequestHandler } from 'express';
import { builtClient, createApp } from './app';
import { readConfig } from './config';
import { seedDemo } from './db/seed/seed-demo';
import { closeDeps, createDeps } from './deps-create';
import { demoSignIns, retireDemoPeople } from './features/people/demo-people';
import { ensureTiles } from './features/tiles/ensure-tiles';
import { registerRunJobs } from './features/runs/run.job';
import { closePool, warmPool } from './workers/pool';

const root = fileURLToPath(new URL('..', import.meta.url));

const config = readConfig(process.env);
const deps = await createDeps(config);
if (config.isDemo) await seedDemo(deps);
else await retireDemoPeople(deps);
await ensureTiles({ folder: config.tilesFolder, log: deps.log });
registerRunJobs(deps);
await deps.jobs.start();
warmPool();

const http = createServer();
http.on('request', createApp(deps, await clientHandler()));
http.listen(config.port, config.host, announce);
for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => void stop());

async function clientHandler(): Promise<RequestHandler> {
  if (!config.isDevelopment) return builtClient(join(root, 'dist'));
  const { createServer: createVite } = await import('vite');
  const vite = await createVite({ root, appType: 'spa', server: { middlewareMode: true, hmr: { server: http } } });
  return vite.middlewares as RequestHandler;
}

function announce(): void {
  const { port } = http.address() as AddressInfo;
  deps.log(`Downreach serves http://${config.host === '0.0.0.0' ? 'localhost' : config.host}:${port}`);
  if (!config.isDemo) return;
  deps.log('Demo mode: the district, its people and its incidents are invented. Sign in as');
  for (const person of demoSignIns) deps.log(`  ${person.roles.join(', ').padEnd(18)} ${person.email.padEnd(36)} ${person.password}`);
  deps.log('Set DOWNREACH_DEMO=off for real work, then make the first administrator with: npm run administrator');
}

async function stop(): Promise<void> {
  http.close();
  http.closeAllConnections();
  // Runs are put back before their workers end.
  await closeDeps(deps);
  await closePool();
  process.exit(0);
}
