import { FormControl, FormGroup } from '@angular/forms';
import { layerBelowNozzle, marginLeavesBed, nameWithin, numberWithin } from './envelope-validators';

const check = (validator: ReturnType<typeof numberWithin>, value: unknown) =>
  validator(new FormControl(value));

describe('numberWithin', () => {
  const length = numberWithin({ least: 0, most: 10_000 });

  it.each([0.001, 220, 10_000])('takes %d', (value) => {
    expect(check(length, value)).toBeNull();
  });

  it.each([0, -1, 10_000.1, Number.NaN, Number.POSITIVE_INFINITY, null, '220'])(
    'does not take %s and says what it wants',
    (value) => {
      expect(check(length, value)).toEqual({ range: 'More than 0, at most 10\u00a0000\u00a0mm' });
    },
  );

  it('takes its least number where that is allowed', () => {
    const margin = numberWithin({ least: 0, most: 1_000, orEqual: true });
    expect(check(margin, 0)).toBeNull();
    expect(check(margin, -0.1)).toEqual({ range: 'From 0, at most 1\u00a0000\u00a0mm' });
  });
});

describe('nameWithin', () => {
  it('wants something to read, up to its limit', () => {
    expect(check(nameWithin(5), '   ')).toHaveProperty('name');
    expect(check(nameWithin(5), 'sixsix')).toHaveProperty('name');
    expect(check(nameWithin(5), ' five5 ')).toBeNull();
  });
});

function group(fields: Record<string, unknown>) {
  const controls = Object.entries(fields).map(([name, value]) => [name, new FormControl(value)]);
  return new FormGroup(Object.fromEntries(controls) as Record<string, FormControl>);
}

describe('marginLeavesBed', () => {
  const bed = { shape: 'rectangular', widthMm: 220, depthMm: 100, diameterMm: null };

  it('wants some bed between the margins, on the shorter side too', () => {
    expect(marginLeavesBed(group({ ...bed, marginMm: 49.9 }))).toBeNull();
    expect(marginLeavesBed(group({ ...bed, marginMm: 50 }))).toHaveProperty('margin');
  });

  it('measures a round bed by its diameter', () => {
    const round = { ...bed, shape: 'round', diameterMm: 60 };
    expect(marginLeavesBed(group({ ...round, marginMm: 29 }))).toBeNull();
    expect(marginLeavesBed(group({ ...round, marginMm: 30 }))).toHaveProperty('margin');
  });

  it('waits until the numbers are there', () => {
    expect(marginLeavesBed(group({ ...bed, widthMm: null, marginMm: null }))).toBeNull();
  });
});

describe('layerBelowNozzle', () => {
  it('wants layers no higher than the nozzle is wide', () => {
    expect(layerBelowNozzle(group({ layerHeightMm: 0.4, nozzleMm: 0.4 }))).toBeNull();
    expect(layerBelowNozzle(group({ layerHeightMm: 0.5, nozzleMm: 0.4 }))).toHaveProperty('layer');
    expect(layerBelowNozzle(group({ layerHeightMm: null, nozzleMm: 0.4 }))).toBeNull();
  });
});
