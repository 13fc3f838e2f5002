// Numbers as they stand on a drawing: groups of three apart by a space, the unit always written.

/** Does not break; the narrow one is as good as invisible in Roboto. */
const space = '\u00a0';

function grouped(value: number, fractionDigits: number): string {
  return value
    .toLocaleString('en-US', {
      minimumFractionDigits: fractionDigits,
      maximumFractionDigits: fractionDigits,
    })
    .replaceAll(',', space);
}

/** A whole number, for example 1 203 998. */
export function writeCount(value: number): string {
  return grouped(value, 0);
}

/** A length in mm with one decimal below a metre, for example "412.5 mm". */
export function writeLengthMm(lengthMm: number): string {
  return `${grouped(lengthMm, lengthMm < 1_000 ? 1 : 0)}${space}mm`;
}

/** A length that a person typed: shown as typed, without zeros behind it. */
export function writeGivenMm(...lengthsMm: readonly number[]): string {
  const words = lengthsMm.map((length) =>
    length.toLocaleString('en-US', { maximumFractionDigits: 3 }).replaceAll(',', space),
  );
  return `${words.join(' × ')}${space}mm`;
}

/** A box as "412.5 × 80.0 × 1 200 mm". */
export function writeSizeMm(sizeMm: readonly number[]): string {
  return `${sizeMm.map((side) => grouped(side, side < 1_000 ? 1 : 0)).join(' × ')}${space}mm`;
}

/** Sizes of unknown unit: three significant digits or the whole number. */
export function writeSizeInFileUnits(size: readonly number[]): string {
  return size
    .map((side) => (side >= 1_000 ? grouped(side, 0) : String(Number(side.toPrecision(4)))))
    .join(' × ');
}

/** A volume in cm³, or in litres from ten of them up. */
export function writeVolume(volumeMm3: number): string {
  const litres = volumeMm3 / 1e6;
  if (litres >= 10) return `${grouped(litres, 1)}${space}l`;
  return `${grouped(volumeMm3 / 1e3, volumeMm3 < 1e5 ? 1 : 0)}${space}cm³`;
}

/** An area in cm², or in m² from one of them up. */
export function writeArea(areaMm2: number): string {
  if (areaMm2 >= 1e6) return `${grouped(areaMm2 / 1e6, 2)}${space}m²`;
  return `${grouped(areaMm2 / 100, areaMm2 < 1e5 ? 1 : 0)}${space}cm²`;
}

/** A file's size in kB of 1024 bytes or MB of 1024 kB, as the upload limit counts them. */
export function writeBytes(bytes: number): string {
  if (bytes < 1024) return `${bytes}${space}bytes`;
  if (bytes < 1024 ** 2) return `${grouped(bytes / 1024, 0)}${space}kB`;
  return `${grouped(bytes / 1024 ** 2, 1)}${space}MB`;
}

/** A moment as date and time of this computer's clock, for example "4 Mar 2031, 14:05". */
export function writeMoment(iso: string): string {
  const moment = new Date(iso);
  const date = moment.toLocaleDateString('en-GB', {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
  });
  const time = moment.toLocaleTimeString('en-GB', { hour: '2-digit', minute: '2-digit' });
  return `${date}, ${time}`;
}
