import {
  writeArea,
  writeBytes,
  writeCount,
  writeGivenMm,
  writeLengthMm,
  writeSizeInFileUnits,
  writeSizeMm,
  writeVolume,
} from './quantities';

/** With plain spaces, so that the expectations can be read. */
const plain = (words: string) => words.replaceAll('\u00a0', ' ');

describe('quantities', () => {
  it('groups thousands by a space and always writes the unit', () => {
    expect(plain(writeCount(1_203_998))).toBe('1 203 998');
    expect(plain(writeLengthMm(412.46))).toBe('412.5 mm');
    expect(plain(writeLengthMm(1204.7))).toBe('1 205 mm');
    expect(plain(writeSizeMm([12, 1234.5, 0.04]))).toBe('12.0 × 1 235 × 0.0 mm');
  });

  it('shows given lengths as they were typed', () => {
    expect(plain(writeGivenMm(220, 0.2, 1250.5))).toBe('220 × 0.2 × 1 250.5 mm');
  });

  it('keeps four digits of a size whose unit nobody knows', () => {
    expect(plain(writeSizeInFileUnits([0.012345, 35.4, 12_345.6]))).toBe('0.01235 × 35.4 × 12 346');
  });

  it('chooses the unit of a volume and an area by their size', () => {
    expect(plain(writeVolume(1_234))).toBe('1.2 cm³');
    expect(plain(writeVolume(9_876_543))).toBe('9 877 cm³');
    expect(plain(writeVolume(31_203_998))).toBe('31.2 l');
    expect(plain(writeArea(12_345))).toBe('123.5 cm²');
    expect(plain(writeArea(1_250_000))).toBe('1.25 m²');
  });

  it('counts bytes as the upload limit does', () => {
    expect(plain(writeBytes(84))).toBe('84 bytes');
    expect(plain(writeBytes(2048))).toBe('2 kB');
    expect(plain(writeBytes(512 * 1024 * 1024))).toBe('512.0 MB');
  });
});
