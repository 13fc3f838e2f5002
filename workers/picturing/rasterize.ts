import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** A picture in the making: per pixel the depth (larger is nearer, -Infinity is empty) and the light. */
export interface Raster {
  readonly width: number;
  readonly height: number;
  readonly depth: Float32Array;
  /** Brightness 0 to 1 of the nearest facet. */
  readonly light: Float32Array;
}

/** An orthographic view: unit vectors to the right, up, and towards the eye; right-handed. */
export interface ViewFrame {
  readonly right: readonly [number, number, number];
  readonly up: readonly [number, number, number];
  readonly toEye: readonly [number, number, number];
}

/** Model coordinates to pixels: pixel = scale · (coordinate − centre) + half the picture, y down. */
export interface Framing {
  readonly scale: number;
  readonly centreRight: number;
  readonly centreUp: number;
}

/**
 * Draws every triangle into the raster, nearest wins, both sides visible.
 * @param shade brightness of a facet from its unit normal in view axes (right, up, towards the eye)
 * Degenerate triangles cover no pixel. Cost O(triangles + pixels covered).
 */
export function rasterize(
  mesh: TriangleMesh,
  frame: ViewFrame,
  framing: Framing,
  raster: Raster,
  shade: (right: number, up: number, toEye: number) => number,
): void {
  const points = projectPoints(mesh.positions, frame, framing, raster);
  const { indices } = mesh;
  const { width, height, depth, light } = raster;
  for (let i = 0; i < indices.length; i += 3) {
    const a = 3 * indices[i];
    const b = 3 * indices[i + 1];
    const c = 3 * indices[i + 2];
    const ax = points[a];
    const ay = points[a + 1];
    const az = points[a + 2];
    const ux = points[b] - ax;
    const uy = points[b + 1] - ay;
    const uz = points[b + 2] - az;
    const vx = points[c] - ax;
    const vy = points[c + 1] - ay;
    const vz = points[c + 2] - az;
    const doubleArea = ux * vy - uy * vx;
    if (doubleArea === 0) continue;
    const x0 = Math.max(0, Math.ceil(ax + Math.min(0, ux, vx) - 0.5));
    const x1 = Math.min(width - 1, Math.floor(ax + Math.max(0, ux, vx) - 0.5));
    const y0 = Math.max(0, Math.ceil(ay + Math.min(0, uy, vy) - 0.5));
    const y1 = Math.min(height - 1, Math.floor(ay + Math.max(0, uy, vy) - 0.5));
    if (x0 > x1 || y0 > y1) continue;
    // Pixels grow downwards, so the cross product's second part turns its sign.
    const nx = uy * vz - uz * vy;
    const ny = uz * vx - ux * vz;
    const length = Math.sqrt(nx * nx + ny * ny + doubleArea * doubleArea);
    const brightness = shade(-nx / length, ny / length, -doubleArea / length);
    const inverse = 1 / doubleArea;
    for (let y = y0; y <= y1; y++) {
      const py = y + 0.5 - ay;
      for (let x = x0; x <= x1; x++) {
        const px = x + 0.5 - ax;
        const s = (px * vy - py * vx) * inverse;
        const t = (ux * py - uy * px) * inverse;
        if (s < 0 || t < 0 || s + t > 1) continue;
        const z = az + s * uz + t * vz;
        const pixel = y * width + x;
        if (z <= depth[pixel]) continue;
        depth[pixel] = z;
        light[pixel] = brightness;
      }
    }
  }
}

/** Every vertex as pixel x, pixel y, and depth in pixels. */
function projectPoints(
  positions: Float64Array,
  { right, up, toEye }: ViewFrame,
  { scale, centreRight, centreUp }: Framing,
  { width, height }: Raster,
): Float64Array {
  const points = new Float64Array(positions.length);
  for (let i = 0; i < positions.length; i += 3) {
    const x = positions[i];
    const y = positions[i + 1];
    const z = positions[i + 2];
    points[i] = width / 2 + scale * (right[0] * x + right[1] * y + right[2] * z - centreRight);
    points[i + 1] = height / 2 - scale * (up[0] * x + up[1] * y + up[2] * z - centreUp);
    points[i + 2] = scale * (toEye[0] * x + toEye[1] * y + toEye[2] * z);
  }
  return points;
}
