/**
 * Random numbers without a state: each is a hash of whole numbers that name it, so any one can be had alone, in any order and as often
 * as wanted. Two lanes of 32 bits, mixed as in MurmurHash3 (A. Appleby, public domain).
 */
export type Key = { a: number; b: number };

/** The key of a tuple of whole numbers (safe integers; also negative). */
export function keyOf(...parts: number[]): Key {
  let key: Key = { a: 0x9e3779b9, b: 0x85ebca6b };
  for (const part of parts) key = derive(key, part);
  return key;
}

export function derive(key: Key, part: number): Key {
  const low = part | 0;
  const high = Math.floor(part / 4294967296) | 0;
  return { a: absorb(absorb(key.a, low), high), b: absorb(absorb(key.b, high ^ 0x5bd1e995), low) };
}

/** Uniform in (0, 1), never an end. */
export const uniform = (key: Key): number => (finish(key.a ^ Math.imul(key.b, 0x27d4eb2f)) + 0.5) / 4294967296;

/** Standard normal, by Box and Muller from the two lanes. */
export function normal(key: Key): number {
  const u = (finish(key.a) + 0.5) / 4294967296;
  const v = finish(key.b ^ 0x165667b1) / 4294967296;
  return Math.sqrt(-2 * Math.log(u)) * Math.cos(2 * Math.PI * v);
}

/** Fills an array with independent standard normals that depend on the key alone. Sfc32 (C. Doty-Humphrey) seeded by it. */
export function fillNormal(key: Key, out: Float64Array): Float64Array {
  let a = key.a | 0;
  let b = key.b | 0;
  let c = finish(key.a ^ key.b) | 0;
  let counter = 1;
  const next = (): number => {
    const t = (((a + b) | 0) + counter) | 0;
    counter = (counter + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (((c << 21) | (c >>> 11)) + t) | 0;
    return t >>> 0;
  };
  for (let i = 0; i < 12; i++) next();
  for (let i = 0; i < out.length; i += 2) {
    const radius = Math.sqrt(-2 * Math.log((next() + 0.5) / 4294967296));
    const angle = (2 * Math.PI * next()) / 4294967296;
    out[i] = radius * Math.cos(angle);
    if (i + 1 < out.length) out[i + 1] = radius * Math.sin(angle);
  }
  return out;
}

function absorb(hash: number, part: number): number {
  let k = Math.imul(part, 0xcc9e2d51);
  k = Math.imul((k << 15) | (k >>> 17), 0x1b873593);
  const h = hash ^ k;
  return (Math.imul((h << 13) | (h >>> 19), 5) + 0xe6546b64) | 0;
}

function finish(hash: number): number {
  let h = hash ^ (hash >>> 16);
  h = Math.imul(h, 0x85ebca6b);
  h ^= h >>> 13;
  h = Math.imul(h, 0xc2b2ae35);
  return (h ^ (h >>> 16)) >>> 0;
}
