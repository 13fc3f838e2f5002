import { type Vector3 } from '../../shared/geometry/vectors/plane.js';

/** Numbers in [0, 1) that depend on the seed alone. Source: mulberry32 (T. Ettinger, public domain). */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

/** A direction uniform on the unit sphere (Archimedes: z is uniform). */
export function randomDirection(random: () => number): Vector3 {
  const z = 2 * random() - 1;
  const angle = 2 * Math.PI * random();
  const r = Math.sqrt(Math.max(0, 1 - z * z));
  const length = Math.hypot(r * Math.cos(angle), r * Math.sin(angle), z);
  return [(r * Math.cos(angle)) / length, (r * Math.sin(angle)) / length, z / length];
}

export function randomInteger(random: () => number, below: number): number {
  return Math.floor(random() * below);
}
