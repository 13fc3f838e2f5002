import { describe, expect, it } from 'vitest';
import { Workspace } from './workspace.js';

describe('a workspace', () => {
  it('hands out arrays that do not overlap, whatever their kinds and lengths', () => {
    const workspace = new Workspace(8 + 24 + 16 + 8);
    const arrays = [
      workspace.naturals(1).fill(7),
      workspace.doubles(3).fill(Math.PI),
      workspace.floats(3).fill(0.5),
      workspace.naturals(2).fill(9),
    ];
    expect(arrays.map((array) => [...new Set(array)])).toEqual([[7], [Math.PI], [0.5], [9]]);
  });

  it('is kept for the next one, unless it is very large', () => {
    const small = new Workspace(4096).doubles(1).buffer;
    expect(new Workspace(2048).doubles(1).buffer).toBe(small);
    const large = new Workspace(2 ** 28 + 8).doubles(1).buffer;
    expect(large.byteLength).toBe(2 ** 28 + 8);
    expect(new Workspace(4096).doubles(1).buffer).toBe(small);
  });

  it('throws rather than handing out more than was asked for', () => {
    const workspace = new Workspace(2 ** 28 + 8);
    workspace.doubles(2 ** 25);
    expect(() => workspace.doubles(2)).toThrow(RangeError);
  });
});
