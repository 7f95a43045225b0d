/** A worker of the case "threads": spins, or solves whole frames. TypeScript cannot be a worker's first file. */
import { parentPort } from 'node:worker_threads';
import { register } from 'tsx/esm/api';

register();
const { solveFrames, spin } = await import('./threads-work.ts');
parentPort.on('message', ({ kind, from, to }) => {
  if (kind === 'spin') {
    spin();
    parentPort.postMessage({ values: [] });
    return;
  }
  const values = solveFrames(from, to);
  parentPort.postMessage({ values }, values.map((frame) => frame.buffer));
});
parentPort.postMessage('ready');
