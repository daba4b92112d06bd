import { sha256Hex } from '../core/hash';
import { normalQuantile } from '../core/normal';
import { philox4x32 } from '../core/random';
import type { Source } from '../core/types';
import { digestOf, type VerificationCheck } from './check';

const group = 'Randomness and hashes';

/** Positions in which two texts differ. */
function differing(a: string, b: string): number {
  let count = Math.abs(a.length - b.length);
  for (let i = 0; i < Math.min(a.length, b.length); i++) if (a[i] !== b[i]) count++;
  return count;
}

/** Exact texts: the gap is the number of digits that differ. */
function exactDigits(key: string, name: string, line: string, published: string, source: Source, compute: () => string): VerificationCheck {
  return {
    key, group, name, line, published, unit: '', bound: 0, reason: 'Whole-number arithmetic: every digit must be equal.', source, cost: 'light',
    run() {
      const measured = compute();
      return { measured, gap: differing(measured, published), digest: digestOf(measured) };
    },
  };
}

const salmon: Source = {
  short: 'Salmon et al. 2011',
  full: 'J. K. Salmon, M. A. Moraes, R. O. Dror, D. E. Shaw, Parallel random numbers: as easy as 1, 2, 3, SC11 (2011); known answers of the Random123 library, file kat_vectors.',
};
function philox(counter: readonly number[], key: readonly number[]): string {
  const out = new Int32Array(4);
  philox4x32(Int32Array.from(counter), Int32Array.from(key), out);
  return Array.from(out, (word) => (word >>> 0).toString(16).padStart(8, '0')).join(' ');
}

const fips: Source = { short: 'FIPS 180-4', full: 'NIST, FIPS PUB 180-4, Secure Hash Standard (2015), with its published examples SHA256.pdf.' };

const quantile: VerificationCheck = {
  key: 'normal-quantile', group, name: 'Normal quantile', line: 'p = 0.975, the map from uniform to normal draws', published: '1.959963984540054', unit: '', bound: 1e-14,
  reason: 'Sixteen printed digits, and a few units in the last place.', source: { short: 'scipy 1.10.1', full: 'scipy.stats.norm.ppf(0.975), scipy 1.10.1; the value of printed normal tables.' }, cost: 'light',
  run() {
    const measured = normalQuantile(0.975);
    return { measured, gap: Math.abs(measured - 1.959963984540054), digest: digestOf(measured) };
  },
};

export const randomnessChecks: readonly VerificationCheck[] = [
  exactDigits('philox-zeros', 'Philox4x32-10', 'counter and key zero', '6627e8d5 e169c58d bc57ac4c 9b00dbd8', salmon, () => philox([0, 0, 0, 0], [0, 0])),
  exactDigits('philox-ones', 'Philox4x32-10', 'counter and key all ones', '408f276d 41c83b0e a20bc7c6 6d5451fd', salmon, () => philox([-1, -1, -1, -1], [-1, -1])),
  exactDigits('philox-pi', 'Philox4x32-10', 'counter and key from the digits of π', 'd16cfe09 94fdcceb 5001e420 24126ea1', salmon, () => philox([0x243f6a88, 0x85a308d3, 0x13198a2e, 0x03707344], [0xa4093822, 0x299f31d0])),
  exactDigits('sha-256-abc', 'SHA-256', "of 'abc', one block", 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad', fips, () => sha256Hex('abc')),
  exactDigits('sha-256-two-blocks', 'SHA-256', 'of 56 letters, two blocks', '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1', fips, () => sha256Hex('abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq')),
  quantile,
];
