import { describe, expect, it } from 'vitest';
import { usualMaterial } from '../../../shared/jobs/material-profile.js';
import { allFields, fieldProblems, readField, withFields } from './material-fields';

describe('the fields of a material', () => {
  it('cover every number of a profile, and write back what they read', () => {
    const numbers = (value: unknown): number =>
      typeof value === 'number'
        ? 1
        : typeof value === 'object' && value !== null
          ? Object.values(value).reduce((sum: number, one) => sum + numbers(one), 0)
          : 0;
    expect(allFields).toHaveLength(numbers(usualMaterial));
    const values = Object.fromEntries(
      allFields.map(({ path }) => [path, readField(usualMaterial, path)]),
    );
    expect(withFields(usualMaterial, values)).toEqual(usualMaterial);
  });

  it('change one number and leave the profile that they were given alone', () => {
    const changed = withFields(usualMaterial, { 'clearances.locatingMm': 0.2 });
    expect(changed.clearances.locatingMm).toBe(0.2);
    expect(usualMaterial.clearances.locatingMm).toBe(0.15);
  });

  it('say where a number is missing or out of range', () => {
    const problems = fieldProblems(usualMaterial, { densityGPerCm3: null, 'glue.filmMm': 9 });
    expect(Object.keys(problems).sort()).toEqual(['densityGPerCm3', 'glue.filmMm']);
  });
});
