import { scaledSizeMm, scaleFrom, scaleValuesOf, type ScaleValues } from './scale-values';

const values: ScaleValues = {
  unit: 'mm',
  factor: null,
  hasTarget: false,
  lengthMm: null,
  axis: 'z',
};

describe('scaleFrom', () => {
  it('asks for a factor only when the unit is another one', () => {
    expect(scaleFrom(values)).toEqual({ unit: 'mm', factor: 1, target: null });
    expect(scaleFrom({ ...values, unit: 'other' })).toBeNull();
    expect(scaleFrom({ ...values, unit: 'other', factor: 10 })?.factor).toBe(10);
  });

  it.each([null, 0, -5, Number.NaN, 100_001])('does not take %s mm as a target', (lengthMm) => {
    expect(scaleFrom({ ...values, hasTarget: true, lengthMm })).toBeNull();
  });

  it('comes back from a stored scale unchanged', () => {
    const scale = {
      unit: 'inch' as const,
      factor: 25.4,
      target: { axis: 'longest' as const, lengthMm: 900 },
    };
    expect(scaleFrom(scaleValuesOf(scale))).toEqual(scale);
  });
});

describe('scaledSizeMm', () => {
  const fileSize = [10, 20, 40] as const;

  it('turns inches into millimetres', () => {
    const [x, y, z] = scaledSizeMm({ unit: 'inch', factor: 25.4, target: null }, fileSize);
    expect(x).toBeCloseTo(254, 9);
    expect(y).toBeCloseTo(508, 9);
    expect(z).toBeCloseTo(1016, 9);
  });

  it.each([
    ['z', [225, 450, 900]],
    ['x', [900, 1800, 3600]],
    ['y', [450, 900, 1800]],
    ['longest', [225, 450, 900]],
  ] as const)('stretches evenly to 900 mm along %s', (axis, expected) => {
    const size = scaledSizeMm(
      { unit: 'inch', factor: 25.4, target: { axis, lengthMm: 900 } },
      fileSize,
    );
    size.forEach((side, index) => expect(side).toBeCloseTo(expected[index] as number, 9));
  });
});
