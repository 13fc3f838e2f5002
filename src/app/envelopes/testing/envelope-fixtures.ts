import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';

type Rectangular = Extract<EnvelopeResponse, { shape: 'rectangular' }>;
type Round = Extract<EnvelopeResponse, { shape: 'round' }>;

const common = {
  id: 'envelope'.padEnd(20, '0'),
  updatedAt: '2031-03-04T13:05:00.000Z',
  heightMm: 250,
  marginMm: 2,
  nozzleMm: 0.4,
  layerHeightMm: 0.2,
};

export function makeRectangular(change: Partial<Rectangular> = {}): Rectangular {
  return {
    ...common,
    name: 'Bench',
    shape: 'rectangular',
    widthMm: 220,
    depthMm: 210,
    ...change,
  };
}

export function makeRound(change: Partial<Round> = {}): Round {
  return { ...common, name: 'Tall', shape: 'round', diameterMm: 200, heightMm: 300, ...change };
}
