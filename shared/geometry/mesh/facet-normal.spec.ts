import { describe, expect, it } from 'vitest';
import { facetArea, facetNormal } from './facet-normal.js';

describe('the normal of a facet', () => {
  const positions = Float64Array.of(0, 0, 5, 4, 0, 5, 0, 3, 5, 8, 0, 5);

  it('has length 1, points where the corners run counter-clockwise, and comes with the area', () => {
    const target = new Float64Array(5);
    expect(facetNormal(positions, Uint32Array.of(9, 0, 1, 2), 1, target, 2)).toBe(6);
    expect([...target]).toEqual([0, 0, 0, 0, 1]);
    expect(facetArea(positions, Uint32Array.of(0, 2, 1), 0)).toBe(6);
  });

  it('is 0 for corners in a line', () => {
    const target = Float64Array.of(7, 7, 7);
    expect(facetNormal(positions, Uint32Array.of(0, 1, 3), 0, target, 0)).toBe(0);
    expect([...target]).toEqual([0, 0, 0]);
  });
});
