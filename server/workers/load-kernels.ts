import { readFileSync } from 'node:fs';
import { createKernels, KERNEL_NAMES, type KernelBytes, type Kernels } from '../solver/kernels/kernels';

const folder = new URL('../solver/kernels/build/', import.meta.url);

/** Reads the modules that `npm run build` made; names the remedy where they are missing. */
export function loadKernels(): Kernels {
  const read = (name: string): Uint8Array => {
    try {
      return readFileSync(new URL(`${name}.wasm`, folder));
    } catch {
      throw new Error(`The kernel ${name} is not built: run "npm run build"`);
    }
  };
  return createKernels(Object.fromEntries(KERNEL_NAMES.map((name) => [name, read(name)])) as KernelBytes);
}
