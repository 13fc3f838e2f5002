import { describe, expect, it } from 'vitest';
import { recordId } from '../../../shared/api/ids.js';
import { createId } from './create-id.js';

describe('createId', () => {
  it('makes identifiers of the contract, no two alike', () => {
    const ids = Array.from({ length: 2_000 }, () => createId());
    expect(ids.every((id) => recordId.safeParse(id).success)).toBe(true);
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('draws again instead of preferring the letters that bytes above 251 would give', () => {
    const bytes = [255, 254, 253, 252, 0, 35, 36, 251];
    let next = 0;
    const id = createId((size) =>
      Uint8Array.from({ length: size }, () => bytes[next++ % bytes.length] ?? 0),
    );
    expect(id).toBe('0z0z'.repeat(5));
  });
});
