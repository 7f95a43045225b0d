export const kernelFolder: string;
export const kernelNames: string[];
export function kernelsAreStale(): boolean;
export function buildKernels(): Promise<void>;
export function ensureKernels(): Promise<void>;
