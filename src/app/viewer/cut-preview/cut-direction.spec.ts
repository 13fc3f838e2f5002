import { extentAlong, normalOf } from './cut-direction';

describe('normalOf', () => {
  it('is exact along the axes', () => {
    const tilt = { leanDegrees: 12, turnDegrees: 34 };
    expect(normalOf('x', tilt)).toEqual([1, 0, 0]);
    expect(normalOf('y', tilt)).toEqual([0, 1, 0]);
    expect(normalOf('z', tilt)).toEqual([0, 0, 1]);
  });

  it('has length 1 for every tilt', () => {
    for (let leanDegrees = 0; leanDegrees <= 90; leanDegrees += 7)
      for (let turnDegrees = 0; turnDegrees < 360; turnDegrees += 31)
        expect(Math.hypot(...normalOf('tilted', { leanDegrees, turnDegrees }))).toBeCloseTo(1, 12);
  });

  it('leans from upright towards x, turned by 90° towards y', () => {
    const [x, y] = normalOf('tilted', { leanDegrees: 90, turnDegrees: 0 });
    expect([x, y]).toEqual([1, 0]);
    expect(normalOf('tilted', { leanDegrees: 90, turnDegrees: 90 })[1]).toBeCloseTo(1, 12);
  });
});

describe('extentAlong', () => {
  const surface = {
    name: 'a',
    positions: new Float32Array([0, 0, 0, 10, 0, 0, 0, -4, 3]),
    indices: new Uint32Array([0, 1, 2]),
  };

  it('gives the ends along a direction', () => {
    expect(extentAlong(surface, [0, 1, 0])).toEqual({ low: -4, high: 0 });
    expect(extentAlong(surface, [1, 0, 0])).toEqual({ low: 0, high: 10 });
  });

  it('is nothing without a vertex', () => {
    const empty = { ...surface, positions: new Float32Array(0) };
    expect(extentAlong(empty, [1, 0, 0])).toEqual({ low: 0, high: 0 });
  });
});
