import { describe, expect, it } from 'vitest';
import { buildSpaceSchema } from '../../../shared/jobs/recipe.js';
import { usableSpace } from './usable-space.js';

const common = {
  id: 'a'.repeat(20),
  name: 'Bed',
  heightMm: 250,
  marginMm: 5,
  nozzleMm: 0.4,
  layerHeightMm: 0.2,
  updatedAt: new Date(0),
};

describe('usableSpace', () => {
  it('takes the margin off both sides of a rectangular bed and nothing off the height', () => {
    const space = usableSpace({ ...common, shape: 'rectangular', widthMm: 220, depthMm: 200 });
    expect(buildSpaceSchema.parse(space)).toEqual({
      shape: 'rectangular',
      widthMm: 210,
      depthMm: 190,
      heightMm: 250,
    });
  });

  it('takes it off the diameter of a round bed on both sides', () => {
    const space = usableSpace({ ...common, shape: 'round', diameterMm: 300 });
    expect(buildSpaceSchema.parse(space)).toEqual({
      shape: 'round',
      diameterMm: 290,
      heightMm: 250,
    });
  });
});
