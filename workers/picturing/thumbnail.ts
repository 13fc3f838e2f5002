import { encode } from 'fast-png';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { rasterize, type Framing, type Raster, type ViewFrame } from './rasterize.js';

export const thumbnailWidth = 320;
export const thumbnailHeight = 240;
/** Samples a pixel and direction; four samples a pixel smooth the edges. */
const sampling = 2;
/** Share of the picture left free on each side. */
const margin = 0.06;

/** Three-quarter view: from the front right, a little above. Degrees; own choice. */
const azimuth = (32 * Math.PI) / 180;
const elevation = (24 * Math.PI) / 180;

/** Ink-blue greys, dark and light end: both stand out from light paper and from dark slate. */
const darkInk = [46, 68, 102] as const;
const lightInk = [176, 192, 212] as const;
/** Edges that hide something behind them are drawn darker by this factor. */
const edgeShade = 0.62;

/** A picture of the mesh, PNG, 320 × 240, transparent around it. An empty mesh gives an empty picture. */
export function drawThumbnail(mesh: TriangleMesh): Uint8Array {
  const width = sampling * thumbnailWidth;
  const height = sampling * thumbnailHeight;
  const raster: Raster = {
    width,
    height,
    depth: new Float32Array(width * height).fill(-Infinity),
    light: new Float32Array(width * height),
  };
  const frame = threeQuarterView();
  rasterize(mesh, frame, frameAround(mesh.positions, frame, width, height), raster, softLight);
  darkenOutlines(raster);
  return encode({
    width: thumbnailWidth,
    height: thumbnailHeight,
    data: mixDown(raster),
    depth: 8,
    channels: 4,
  });
}

function threeQuarterView(): ViewFrame {
  const [sinA, cosA, sinE, cosE] = [
    Math.sin(azimuth),
    Math.cos(azimuth),
    Math.sin(elevation),
    Math.cos(elevation),
  ];
  // The eye looks along +y when both angles are 0; z stays upright.
  return {
    right: [cosA, sinA, 0],
    up: [-sinA * sinE, cosA * sinE, cosE],
    toEye: [sinA * cosE, -cosA * cosE, sinE],
  };
}

/** Fits the mesh as it is seen into the picture. */
function frameAround(
  positions: Float64Array,
  { right, up }: ViewFrame,
  width: number,
  height: number,
): Framing {
  let [r0, r1, u0, u1] = [Infinity, -Infinity, Infinity, -Infinity];
  for (let i = 0; i < positions.length; i += 3) {
    const x = positions[i];
    const y = positions[i + 1];
    const z = positions[i + 2];
    const r = right[0] * x + right[1] * y + right[2] * z;
    const u = up[0] * x + up[1] * y + up[2] * z;
    if (r < r0) r0 = r;
    if (r > r1) r1 = r;
    if (u < u0) u0 = u;
    if (u > u1) u1 = u;
  }
  const room = 1 - 2 * margin;
  const scale = Math.min((room * width) / (r1 - r0), (room * height) / (u1 - u0));
  return {
    scale: Number.isFinite(scale) ? scale : 1,
    centreRight: (r0 + r1) / 2,
    centreUp: (u0 + u1) / 2,
  };
}

/** A soft light from the upper left before the model, and a weaker one from the sky. */
function softLight(right: number, up: number, toEye: number): number {
  // An open surface shows its inside: the same light, dimmer.
  const side = toEye < 0 ? -1 : 1;
  const key = side * (-0.45 * right + 0.6 * up + 0.66 * toEye);
  const sky = 0.5 + 0.5 * side * up;
  const light = 0.14 + 0.62 * Math.max(0, key) + 0.24 * sky;
  return Math.min(1, side < 0 ? 0.55 * light : light);
}

/** Darkens the near side of every step in depth, so that parts in front of others stand out. */
function darkenOutlines({ width, height, depth, light }: Raster): void {
  const step = 0.012 * width;
  const shaded = new Uint8Array(width * height);
  for (let y = 0; y < height; y++)
    for (let x = 0; x < width; x++) {
      const pixel = y * width + x;
      const own = depth[pixel];
      if (own === -Infinity) continue;
      const isEdge =
        (x > 0 && own - depth[pixel - 1] > step) ||
        (x < width - 1 && own - depth[pixel + 1] > step) ||
        (y > 0 && own - depth[pixel - width] > step) ||
        (y < height - 1 && own - depth[pixel + width] > step);
      if (isEdge) shaded[pixel] = 1;
    }
  for (let pixel = 0; pixel < shaded.length; pixel++)
    if (shaded[pixel] === 1) light[pixel] *= edgeShade;
}

/** Averages the samples of each pixel; the share of covered samples becomes its opacity. */
function mixDown({ width, depth, light }: Raster): Uint8Array {
  const data = new Uint8Array(4 * thumbnailWidth * thumbnailHeight);
  for (let y = 0; y < thumbnailHeight; y++)
    for (let x = 0; x < thumbnailWidth; x++) {
      let covered = 0;
      let sum = 0;
      for (let j = 0; j < sampling; j++)
        for (let i = 0; i < sampling; i++) {
          const pixel = (sampling * y + j) * width + sampling * x + i;
          if (depth[pixel] === -Infinity) continue;
          covered++;
          sum += light[pixel];
        }
      if (covered === 0) continue;
      const to = 4 * (y * thumbnailWidth + x);
      const bright = sum / covered;
      for (let k = 0; k < 3; k++)
        data[to + k] = Math.round(darkInk[k] + (lightInk[k] - darkInk[k]) * bright);
      data[to + 3] = Math.round((255 * covered) / (sampling * sampling));
    }
  return data;
}
