import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { fitsUpright, usableSpace } from './upright-fit';

const common = {
  id: 'e'.repeat(20),
  name: 'Bench',
  updatedAt: '2031-01-01T00:00:00.000Z',
  heightMm: 250,
  marginMm: 5,
  nozzleMm: 0.4,
  layerHeightMm: 0.2,
};
const rectangular: EnvelopeResponse = {
  ...common,
  shape: 'rectangular',
  widthMm: 220,
  depthMm: 180,
};
const round: EnvelopeResponse = { ...common, shape: 'round', diameterMm: 210 };

describe('usableSpace', () => {
  it('takes the margin off the bed on both sides and leaves the height', () => {
    expect(usableSpace(rectangular)).toEqual({
      shape: 'rectangular',
      widthMm: 210,
      depthMm: 170,
      heightMm: 250,
    });
    expect(usableSpace(round)).toEqual({ shape: 'round', diameterMm: 200, heightMm: 250 });
  });
});

describe('fitsUpright', () => {
  const space = usableSpace(rectangular);

  it('takes a box that fills the space to the last', () => {
    expect(fitsUpright([210, 170, 250], space)).toEqual({ fits: true, reason: '' });
  });

  it('takes a box that fits after a quarter turn', () => {
    expect(fitsUpright([170, 210, 10], space).fits).toBe(true);
  });

  it('says what is too large and by how much', () => {
    const { fits, reason } = fitsUpright([230, 100, 262], space);
    expect(fits).toBe(false);
    expect(reason).toMatch(/12\.0.mm too tall/);
    expect(reason).toMatch(/20\.0.mm too long for the bed/);
  });

  it('holds the corners of the box against a round bed', () => {
    expect(fitsUpright([120, 160, 10], usableSpace(round)).fits).toBe(true);
    expect(fitsUpright([120, 161, 10], usableSpace(round)).fits).toBe(false);
  });
});
