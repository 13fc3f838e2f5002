import { writeLengthMm } from '../ui/format/quantities';

/** Length of seam by how exposed it is: metres from one metre on. */
export function writeSightMm(lengthMm: number): string {
  return lengthMm >= 1000
    ? `${(lengthMm / 1000).toFixed(2)}\u202fm`
    : writeLengthMm(Math.round(lengthMm));
}

/** Stress for comparing seams, kPa, in as many digits as such a figure deserves. */
export function writeStress(kpa: number): string {
  if (kpa >= 100_000) return '> 100\u202f000\u202fkPa';
  return `${kpa >= 100 ? Math.round(kpa) : Number(kpa.toPrecision(2))}\u202fkPa`;
}
