import { decode } from 'fast-png';
import { describe, expect, it } from 'vitest';
import { box, join, sphere } from '../../test/support/shapes.js';
import { drawThumbnail, thumbnailHeight, thumbnailWidth } from './thumbnail.js';

function pixelsOf(png: Uint8Array) {
  const { data, width, height, channels } = decode(png);
  expect([width, height, channels]).toEqual([thumbnailWidth, thumbnailHeight, 4]);
  const at = (x: number, y: number) => [
    ...data.slice(4 * (y * width + x), 4 * (y * width + x) + 4),
  ];
  let covered = 0;
  for (let i = 3; i < data.length; i += 4) covered += data[i] / 255;
  return { at, covered };
}

/** Relative luminance of WCAG 2.2. */
function luminance(colour: readonly number[]): number {
  const [r, g, b] = colour.map((value) => {
    const share = value / 255;
    return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

describe('the thumbnail', () => {
  it('fills the picture with a ball as large as it fits, on a transparent ground', () => {
    const { at, covered } = pixelsOf(drawThumbnail(sphere(50, 96, 48).mesh));
    const radius = (thumbnailHeight / 2) * (1 - 2 * 0.06);
    expect(Math.abs(covered / (Math.PI * radius ** 2) - 1)).toBeLessThan(0.01);
    expect(at(0, 0)[3]).toBe(0);
    expect(at(160, 120)[3]).toBe(255);
  });

  it('smooths edges: a ball has pixels that are covered in part', () => {
    const { data } = decode(drawThumbnail(sphere(50, 96, 48).mesh));
    const partial = [...data].filter((value, i) => i % 4 === 3 && value > 0 && value < 255);
    expect(partial.length).toBeGreaterThan(200);
  });

  it('shows three faces of a box in three tones that stand out from paper and from slate', () => {
    const { at } = pixelsOf(drawThumbnail(box([0, 0, 0], [100, 100, 100]).mesh));
    const tones = [at(150, 60), at(110, 150), at(210, 140)];
    expect(new Set(tones.map((tone) => tone.join())).size).toBe(3);
    const paper = luminance([0xf7, 0xf5, 0xf0]);
    const slate = luminance([0x14, 0x18, 0x1d]);
    for (const tone of tones) {
      expect(tone[3]).toBe(255);
      const own = luminance(tone.slice(0, 3));
      expect((paper + 0.05) / (own + 0.05)).toBeGreaterThan(1.5);
      expect((own + 0.05) / (slate + 0.05)).toBeGreaterThan(1.5);
    }
  });

  it('draws what is nearest: a plate hides a ball behind it and not one before it', () => {
    const plate = box([-100, -5, -100], [100, 5, 100]).mesh;
    const [across, tilt] = [(32 * Math.PI) / 180, (24 * Math.PI) / 180];
    const toEye = [
      Math.sin(across) * Math.cos(tilt),
      -Math.cos(across) * Math.cos(tilt),
      Math.sin(tilt),
    ];
    const withBallAt = (distance: number) => {
      const ball = sphere(10, 24, 12).mesh;
      const positions = ball.positions.map((value, i) => value + distance * toEye[i % 3]);
      return drawThumbnail(join([plate, { ...ball, positions }]));
    };
    const alone = drawThumbnail(plate);
    expect(withBallAt(-60)).toEqual(alone);
    expect(withBallAt(60)).not.toEqual(alone);
  });

  it('draws nothing of nothing, and a flat model without failing', () => {
    const empty = { positions: new Float64Array(0), indices: new Uint32Array(0) };
    expect(pixelsOf(drawThumbnail(empty)).covered).toBe(0);
    const point = { positions: new Float64Array(9).fill(3), indices: Uint32Array.of(0, 1, 2) };
    expect(pixelsOf(drawThumbnail(point)).covered).toBe(0);
  });
});
