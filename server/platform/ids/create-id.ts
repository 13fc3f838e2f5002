import { randomBytes } from 'node:crypto';

const ALPHABET = '0123456789abcdefghijklmnopqrstuvwxyz';
const LENGTH = 20;
/** The largest multiple of 36 in a byte: bytes above it would make some letters likelier. */
const FAIR_BELOW = 252;

/** Makes identifiers; tests pass one that counts. */
export type CreateId = () => string;

/** 20 lower-case letters and digits from the system's random source: about 103 bits. */
export function createId(random: (size: number) => Uint8Array = randomBytes): string {
  let id = '';
  while (id.length < LENGTH) {
    for (const byte of random(LENGTH)) {
      if (byte < FAIR_BELOW && id.length < LENGTH) id += ALPHABET[byte % 36];
    }
  }
  return id;
}
