/**
 * What the kernels need of WebAssembly, which browsers and Node both have and the language library leaves out.
 * Every kernel object owns one instance with one private memory, laid out once and never grown afterwards, so that its
 * views stay valid and two objects never share scratch.
 */
type WasmMemory = { readonly buffer: ArrayBuffer; grow(pages: number): number };
type WasmModule = object;
type WasmHost = {
  Module: new (bytes: Uint8Array) => WasmModule;
  Instance: new (module: WasmModule, imports: object) => { readonly exports: object };
};

const host = (globalThis as unknown as { WebAssembly: WasmHost }).WebAssembly;
const PAGE_BYTES = 65_536;
/** The modules keep nothing of their own below this address; see `--initialMemory` in build.mjs. */
const FIRST_BYTE = 4096;
/** Vector loads may reach past the end of the last array by less than this. */
const SLACK_BYTES = 256;

export type CompiledKernel = { readonly module: WasmModule };
export const compileKernel = (bytes: Uint8Array): CompiledKernel => ({ module: new host.Module(bytes) });

/** Hands out places in a memory that does not exist yet; addresses are multiples of 64 bytes. */
export class Layout {
  private next = FIRST_BYTE;

  take(bytes: number): number {
    const at = this.next;
    this.next += Math.ceil(bytes / 64) * 64;
    return at;
  }

  f64 = (count: number): number => this.take(8 * count);
  f32 = (count: number): number => this.take(4 * count);

  get bytes(): number {
    return this.next + SLACK_BYTES;
  }
}

/** An instance whose memory, all zero, holds the layout. `E` names the functions the module exports. */
export function instantiate<E extends object>(kernel: CompiledKernel, layout: Layout): { calls: E; buffer: ArrayBuffer } {
  const exports = new host.Instance(kernel.module, {}).exports as E & { memory: WasmMemory };
  const missing = layout.bytes - exports.memory.buffer.byteLength;
  if (missing > 0) exports.memory.grow(Math.ceil(missing / PAGE_BYTES));
  return { calls: exports, buffer: exports.memory.buffer };
}
