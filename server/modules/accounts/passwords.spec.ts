import { describe, expect, it } from 'vitest';
import { hashPassword, isRightPassword } from './passwords.js';

describe('passwords', () => {
  it('knows the right one from a wrong one', async () => {
    const known = await hashPassword('stage left');
    expect(known).toMatch(/^\$2b\$10\$/);
    expect(await isRightPassword('stage left', known)).toBe(true);
    expect(await isRightPassword('stage right', known)).toBe(false);
  });

  it('does as much work for an account that is not there as for one that is', async () => {
    const known = await hashPassword('stage left');
    const timeMs = async (hash: string | null) => {
      const start = performance.now();
      expect(await isRightPassword('wrong', hash)).toBe(false);
      return performance.now() - start;
    };
    // The fastest of a few: a busy machine only ever adds time.
    const fastest = { there: Infinity, missing: Infinity };
    for (let run = 0; run < 3; run++) {
      fastest.there = Math.min(fastest.there, await timeMs(known));
      fastest.missing = Math.min(fastest.missing, await timeMs(null));
    }
    // The cost is a power of two: one step less would be half the time, no work a thousandth.
    expect(fastest.missing).toBeGreaterThan(fastest.there / 4);
  });
});
