import { loadKernels, type Kernels } from './web-assembly';

/*
 * The memory of the compiled kernels: first the blocks that stay between calls, one after another, then scratch that lives for one
 * call. Views are made anew for every call, because growing the memory detaches the old ones.
 */

/** More than this is left to the TypeScript twins: a 32-bit memory ends at 4 GiB, and it never shrinks. */
const largestMemory = 0x40000000;
/** Blocks that stay: beyond these all are sent away and the newest starts anew. */
const largestStay = 0x18000000;
const mostResidents = 4;
const page = 0x10000;

/** Something that wants to stay in the memory between calls, and can be taken out. */
export interface Resident {
  readonly bytes: number;
  /** True once it is not needed any more. */
  readonly released?: boolean;
  /** Copies what is needed out of the memory before the place is given away. */
  leave(from: ArrayBuffer, address: number): void;
}

let compiled = true;
// Weak: an owner that nobody holds needs no place. When that is noticed changes the time taken, never a value.
let residents: { readonly owner: WeakRef<Resident>; readonly bytes: number }[] = [];

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
  if (found) sendAway(found);
  compiled = use;
}

const aligned = (bytes: number): number => (bytes + 63) & ~63;
const stay = (): number => residents.reduce((sum, { bytes }) => sum + bytes, 0);

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
  const total = bytes.reduce((sum, size) => sum + aligned(size), 0);
  if (total > largestMemory) return null;
  if (stay() + total > largestMemory) sendAway(found);
  return place(found, bytes);
}

/**
 * As `scratchOf`, with a block for `owner` that stays.
 * @returns also its address, and whether the block is new to the memory and has to be filled
 */
export function scratchWith(owner: Resident, ...bytes: readonly number[]): (Scratch & { readonly address: number; readonly fresh: boolean }) | null {
  const found = kernels();
  if (!found) return null;
  const own = aligned(owner.bytes);
  const total = bytes.reduce((sum, size) => sum + aligned(size), 0);
  if (own + total > largestMemory) return null;
  let index = residents.findIndex((resident) => resident.owner.deref() === owner);
  const fresh = index < 0 || stay() + total > largestMemory;
  if (fresh) {
    while (residents.length > 0 && (residents[residents.length - 1].owner.deref()?.released ?? true)) residents.pop();
    if (residents.length >= mostResidents || stay() + own > largestStay || stay() + own + total > largestMemory || index >= 0) sendAway(found);
    index = residents.length;
    residents.push({ owner: new WeakRef(owner), bytes: own });
  }
  const scratch = place(found, bytes);
  if (!scratch) {
    if (fresh) residents.pop();
    else sendAway(found);
    return null;
  }
  return { ...scratch, address: addressOf(found, index), fresh };
}

function addressOf(found: Kernels, index: number): number {
  let address = aligned(found.firstFree());
  for (let k = 0; k < index; k++) address += residents[k].bytes;
  return address;
}

function sendAway(found: Kernels): void {
  residents.forEach(({ owner }, index) => {
    const resident = owner.deref();
    if (resident && !resident.released) resident.leave(found.memory.buffer as ArrayBuffer, addressOf(found, index));
  });
  residents = [];
}

function place(found: Kernels, bytes: readonly number[]): Scratch | null {
  const addresses: number[] = [];
  let end = addressOf(found, residents.length);
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
