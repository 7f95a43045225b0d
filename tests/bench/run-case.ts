/** One case in a process of its own: `node --import tsx tests/bench/run-case.ts puff-50`. Prints one JSON line. */
import { cases } from './cases/all';
import { measure } from './harness';
import { Peer } from './peer';

const name = process.argv[2]!;
const make = cases[name];
if (!make) throw new Error(`No case is called "${name}"`);
const peer = await Peer.start();
try {
  console.log(JSON.stringify(await measure(name, await make(peer))));
} finally {
  peer?.stop();
}
