/**
 * Compiles the AssemblyScript sources in `wasm/` to WebAssembly in `build/`: `node server/solver/kernels/build.mjs`.
 * One module a kernel, SIMD, no runtime and no garbage collector: memory is laid out by the callers in TypeScript.
 * The sources end in `.as`, so that TypeScript and the linter, to which their types mean nothing, leave them alone.
 */
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, statSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const here = dirname(fileURLToPath(import.meta.url));
const sourceFolder = join(here, 'wasm');
export const kernelFolder = join(here, 'build');
export const kernelNames = ['puffs', 'volume', 'poisson', 'channel', 'walk', 'release'];

const sources = () => readdirSync(sourceFolder).map((name) => join(sourceFolder, name));
const outputOf = (name) => join(kernelFolder, `${name}.wasm`);

/** True where a module is missing or older than any source or this file. */
export function kernelsAreStale() {
  const newest = Math.max(...[...sources(), fileURLToPath(import.meta.url)].map((file) => statSync(file).mtimeMs));
  return kernelNames.some((name) => !existsSync(outputOf(name)) || statSync(outputOf(name)).mtimeMs < newest);
}

async function compile(asc, name) {
  const messages = [];
  let binary = null;
  const options = ['-O3', '--converge', '--noAssert', '--uncheckedBehavior', 'always', '--runtime', 'stub', '--enable', 'simd', '--initialMemory', '1'];
  const { error } = await asc.main([`${name}.ts`, '--outFile', 'out.wasm', ...options], {
    stderr: { write: (text) => messages.push(String(text)) },
    readFile: (file) => {
      const path = join(sourceFolder, `${basename(file, '.ts')}.as`);
      return file.endsWith('.ts') && existsSync(path) ? readFileSync(path, 'utf8') : null;
    },
    writeFile: (_file, contents) => { binary = contents; },
    listFiles: () => [],
  });
  if (error || !binary) throw new Error(`The kernel ${name} does not compile:\n${messages.join('')}`);
  return binary;
}

/** Compiles all kernels. Each file appears whole or not at all, for others may read or build at the same time. */
export async function buildKernels() {
  const { default: asc } = await import('assemblyscript/asc');
  mkdirSync(kernelFolder, { recursive: true });
  for (const name of kernelNames) {
    const binary = await compile(asc, name);
    const draft = `${outputOf(name)}.${process.pid}`;
    writeFileSync(draft, binary);
    renameSync(draft, outputOf(name));
  }
}

/** For tests, benchmarks and the start of the server: builds when something is stale. */
export async function ensureKernels() {
  if (kernelsAreStale()) await buildKernels();
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) await buildKernels();
