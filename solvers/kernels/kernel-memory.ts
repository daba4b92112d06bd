import { loadKernels, type Kernels } from './web-assembly';

/*
 * The memory of the compiled kernels: first one resident block (the factor used last), then scratch that lives for one call.
 * Views are made anew for every call, because growing the memory detaches the old ones.
 */

/** More than this is left to the TypeScript twins: a 32-bit memory ends at 4 GiB, and it never shrinks. */
const largestMemory = 0x40000000;
const page = 0x10000;

/** Something that wants to stay in the memory between calls, and can be taken out. */
export interface Resident {
  readonly bytes: number;
  /** Copies what is needed out of the memory before another takes the place. */
  leave(from: ArrayBuffer, address: number): void;
}

let compiled = true;
let resident: WeakRef<Resident> | null = null;
let residentBytes = 0;

/**
 * The compiled kernels of this thread, or null where the engine or a content policy refuses them. Their TypeScript twins then
 * give the same bits, more slowly.
 */
export function kernels(): Kernels | null {
  return compiled ? loadKernels() : null;
}

/** Turns the compiled kernels off (false) and on again, so that a test can compare them with their twins. */
export function useCompiledKernels(use: boolean): void {
  const found = kernels();
  if (found) evict(found);
  compiled = use;
}

const aligned = (bytes: number): number => (bytes + 63) & ~63;

/** Scratch addresses of one call, in the order asked for. */
export interface Scratch {
  readonly kernels: Kernels;
  readonly addresses: readonly number[];
  readonly buffer: ArrayBuffer;
}

/**
 * Room for blocks of these many bytes, for the call that follows only; what they hold is not defined.
 * @returns null when there are no compiled kernels, or the blocks are too large for their memory
 */
export function scratchOf(...bytes: readonly number[]): Scratch | null {
  const found = kernels();
  if (!found) return null;
  let total = 0;
  for (const size of bytes) total += aligned(size);
  if (total > largestMemory) return null;
  if (residentBytes + total > largestMemory) evict(found);
  return place(found, aligned(found.firstFree()) + residentBytes, bytes);
}

/**
 * As `scratchOf`, with the block of `owner` first, resident until another owner asks.
 * @returns also whether the block is new to the memory and has to be filled
 */
export function scratchWith(owner: Resident, ...bytes: readonly number[]): (Scratch & { readonly address: number; readonly fresh: boolean }) | null {
  const found = kernels();
  if (!found) return null;
  let total = aligned(owner.bytes);
  for (const size of bytes) total += aligned(size);
  if (total > largestMemory) return null;
  const fresh = resident?.deref() !== owner;
  if (fresh) {
    evict(found);
    resident = new WeakRef(owner);
    residentBytes = aligned(owner.bytes);
  }
  const address = aligned(found.firstFree());
  const scratch = place(found, address + residentBytes, bytes);
  if (!scratch) {
    if (fresh) forget();
    else evict(found);
    return null;
  }
  return { ...scratch, address, fresh };
}

/** Ends the stay of the resident block without copying anything out. */
export function forget(): void {
  resident = null;
  residentBytes = 0;
}

function evict(found: Kernels): void {
  resident?.deref()?.leave(found.memory.buffer as ArrayBuffer, aligned(found.firstFree()));
  forget();
}

function place(found: Kernels, from: number, bytes: readonly number[]): Scratch | null {
  const addresses: number[] = [];
  let end = from;
  for (const size of bytes) {
    addresses.push(end);
    end += aligned(size);
  }
  // A tile at the very end may read a little past its block.
  const missing = end + 256 - found.memory.buffer.byteLength;
  if (missing > 0) {
    try {
      found.memory.grow(Math.ceil(missing / page));
    } catch {
      return null;
    }
  }
  return { kernels: found, addresses, buffer: found.memory.buffer as ArrayBuffer };
}
