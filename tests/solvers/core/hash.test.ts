import { sha256 as nobleSha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { canonicalJson, contentHash, sha256Hex } from '../../../solvers/core/hash';

describe('SHA-256', () => {
  // FIPS 180-4 examples (NIST, SHA256.pdf): one block, two blocks.
  it('gives the published examples', () => {
    expect(sha256Hex('abc')).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad');
    expect(sha256Hex('abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq')).toBe('248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1');
    expect(sha256Hex('')).toBe('e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855');
  });
  it('equals @noble/hashes and OpenSSL at every length around the block size', () => {
    for (const length of [0, 1, 31, 54, 55, 56, 57, 63, 64, 65, 119, 120, 127, 128, 129, 1000]) {
      const bytes = Uint8Array.from({ length }, (_, i) => (i * 37 + length) & 255);
      expect(sha256Hex(bytes)).toBe(bytesToHex(nobleSha256(bytes)));
      expect(sha256Hex(bytes)).toBe(createHash('sha256').update(bytes).digest('hex'));
    }
  });
  it('hashes an array over its little-endian bytes, also a view into a larger buffer', () => {
    const values = Float64Array.from([1.5, -2, 1e-300]);
    const bytes = Buffer.alloc(24);
    values.forEach((value, i) => bytes.writeDoubleLE(value, 8 * i));
    expect(sha256Hex(values)).toBe(createHash('sha256').update(bytes).digest('hex'));
    expect(sha256Hex(Float64Array.from([9, ...values, 9]).subarray(1, 4))).toBe(sha256Hex(values));
  });
});

describe('canonical JSON', () => {
  it('does not depend on the order of keys and leaves undefined out', () => {
    expect(canonicalJson({ b: [1, { d: 2, c: 'x' }], a: null, z: undefined })).toBe('{"a":null,"b":[1,{"c":"x","d":2}]}');
    expect(contentHash({ a: 1, b: 2 })).toBe(contentHash({ b: 2, a: 1 }));
  });
  it('writes minus zero as zero and refuses numbers that JSON cannot hold', () => {
    expect(canonicalJson(-0)).toBe('0');
    expect(() => canonicalJson({ a: [NaN] })).toThrow(RangeError);
    expect(() => canonicalJson(Infinity)).toThrow(RangeError);
    expect(() => canonicalJson(() => 1)).toThrow(TypeError);
  });
});
