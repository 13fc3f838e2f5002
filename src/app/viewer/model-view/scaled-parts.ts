import {
  type ScenePiece,
  type SceneSeam,
  type SurfacePart,
  type Triple,
  type ViewParts,
} from '../scene/view-parts';

/** The box of some surfaces, in their own unit. Zeros when there is no vertex. */
export function boxOf(surfaces: readonly SurfacePart[]): { min: Triple; size: Triple } {
  const min = [Infinity, Infinity, Infinity] as [number, number, number];
  const max = [-Infinity, -Infinity, -Infinity] as [number, number, number];
  for (const { positions } of surfaces)
    for (let at = 0; at < positions.length; at++) {
      const axis = at % 3;
      const value = positions[at]!;
      if (value < min[axis]!) min[axis] = value;
      if (value > max[axis]!) max[axis] = value;
    }
  if (min[0] > max[0]) return { min: [0, 0, 0], size: [0, 0, 0] };
  return { min, size: [max[0] - min[0], max[1] - min[1], max[2] - min[2]] };
}

/** Millimetres per unit of a picture; null when it has no size. */
export function pictureFactor(size: Triple, sizeMm: Triple): number | null {
  const longest = size.indexOf(Math.max(...size));
  return size[longest] === 0 ? null : sizeMm[longest]! / size[longest]!;
}

/** The rims of holes, which a picture names `hole-1` and so on, in millimetres. */
export function rimsOf(parts: ViewParts, factor: number): SceneSeam[] {
  const name = parts.surfaces[0]?.name ?? '';
  return parts.lines
    .filter((line) => line.name.startsWith('hole-'))
    .map(({ positions }) => ({
      between: [name, name],
      positions: positions.map((value) => value * factor),
    }));
}

/**
 * The model as one piece in millimetres. Its picture comes in the unit of its file; the factor is
 * taken from the size it is to have, along the longest side.
 */
export function wholeModel(parts: ViewParts, sizeMm: Triple): ScenePiece | null {
  const { min, size } = boxOf(parts.surfaces);
  const factor = pictureFactor(size, sizeMm);
  if (parts.surfaces.length === 0 || factor === null) return null;
  const surface = scaled(joined(parts.surfaces), factor);
  const centreMm = min.map((low, axis) => (low + size[axis]! / 2) * factor);
  return {
    item: 1,
    name: surface.name,
    surface,
    centreMm: centreMm as unknown as Triple,
    placement: null,
  };
}

function scaled(surface: SurfacePart, factor: number): SurfacePart {
  const { positions, walls } = surface;
  return {
    ...surface,
    positions: positions.map((value) => value * factor),
    ...(walls && { walls: walls.map((value) => value * factor) }),
  };
}

/** Several surfaces as one. */
function joined(surfaces: readonly SurfacePart[]): SurfacePart {
  const [first] = surfaces;
  if (surfaces.length === 1 && first) return first;
  const total = (pick: (surface: SurfacePart) => number) =>
    surfaces.reduce((sum, surface) => sum + pick(surface), 0);
  const positions = new Float32Array(total((surface) => surface.positions.length));
  const indices = new Uint32Array(total((surface) => surface.indices.length));
  let vertexAt = 0;
  let indexAt = 0;
  for (const surface of surfaces) {
    positions.set(surface.positions, vertexAt * 3);
    for (const index of surface.indices) indices[indexAt++] = index + vertexAt;
    vertexAt += surface.positions.length / 3;
  }
  return { name: first?.name ?? 'model', positions, indices };
}
