import { type ValidatorFn } from '@angular/forms';

export const largestSeed = 2 ** 31 - 1;

/** A whole number from 0 to the largest seed. */
export const isSeed: ValidatorFn = (control) => {
  const seed: unknown = control.value;
  const isWhole = typeof seed === 'number' && Number.isInteger(seed);
  return isWhole && seed >= 0 && seed <= largestSeed ? null : { seed: true };
};
