/** Random numbers under a seed: the same seed gives the same numbers everywhere. */
import { normalQuantile } from './normal.js';

export interface Generator {
  /** Uniform on the open interval (0, 1), in steps of 2⁻⁵³. */
  readonly uniform: () => number;
  /** Standard normal, by inversion. */
  readonly normal: () => number;
}

/**
 * A seed, 32 bits unsigned, from a text: Fowler, Noll & Vo's hash FNV-1a of its UTF-8 bytes (RFC 9923).
 */
export function seedOf(text: string): number {
  let hash = 0x811c9dc5;
  for (const byte of new TextEncoder().encode(text)) hash = Math.imul(hash ^ byte, 0x01000193);
  return hash >>> 0;
}

/**
 * The generator xoshiro128** (Blackman & Vigna, "Scrambled linear pseudorandom number generators", ACM Transactions on
 * Mathematical Software 47, 2021), its state filled from the seed by a Weyl sequence through the 32-bit finalizer of
 * MurmurHash3.
 */
export function createGenerator(seed: number): Generator {
  if (!Number.isInteger(seed) || seed < 0 || seed > 0xffffffff)
    throw new Error(`a seed is a whole number from 0 to 4294967295, not ${seed}`);
  const state = new Uint32Array(4);
  for (let i = 0; i < 4; i++) state[i] = scramble(seed + Math.imul(i + 1, 0x9e3779b9));
  const next = () => {
    const result = Math.imul(rotate(Math.imul(state[1], 5), 7), 9) >>> 0;
    const shifted = state[1] << 9;
    state[2] ^= state[0];
    state[3] ^= state[1];
    state[1] ^= state[2];
    state[0] ^= state[3];
    state[2] ^= shifted;
    state[3] = rotate(state[3], 11);
    return result;
  };
  const uniform = () => {
    const high = next() >>> 6;
    const low = next() >>> 6;
    return (high * 2 ** 26 + low + 0.5) * 2 ** -52;
  };
  return { uniform, normal: () => normalQuantile(uniform()) };
}

function rotate(x: number, bits: number): number {
  return (x << bits) | (x >>> (32 - bits));
}

function scramble(x: number): number {
  let h = x | 0;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return (h ^ (h >>> 16)) >>> 0;
}
