import type { Solid } from './binary-stl.js';
import type { Point } from './thick-sheet.js';

/** A point of the centre line with the tube's radius there, mm. */
export interface Station {
  readonly at: Point;
  readonly radius: number;
}

/**
 * A full tube along a line through the stations, closed by a flat end at both sides. The line is a
 * centripetal-free Catmull–Rom spline (uniform), the radius runs with it. Rings stand square to the
 * line; their direction is carried along without twist (double reflection, Wang et al., ACM TOG
 * 27(1), 2008). The caller keeps the radius below the radius of curvature.
 */
export function sweptTubeSolid({
  stations,
  ringsPerSpan,
  sides,
}: {
  stations: readonly Station[];
  ringsPerSpan: number;
  sides: number;
}): Solid {
  const line = sampleLine(stations, ringsPerSpan);
  const tangents = line.map((_, ring) => tangentAt(line, ring));
  const positions: number[] = [];
  let across = anyAcross(tangents[0] ?? [0, 0, 1]);
  line.forEach(({ at, radius }, ring) => {
    const tangent = tangents[ring] as Point;
    if (ring > 0)
      across = carried(across, line[ring - 1] as Station, tangents[ring - 1] as Point, at, tangent);
    const up = cross(tangent, across);
    for (let side = 0; side < sides; side++) {
      const angle = (2 * Math.PI * side) / sides;
      const [c, s] = [radius * Math.cos(angle), radius * Math.sin(angle)];
      positions.push(
        ...at.map((value, axis) => value + c * (across[axis] ?? 0) + s * (up[axis] ?? 0)),
      );
    }
  });
  return { positions: withEnds(positions, line), indices: tubeIndices(line.length, sides) };
}

function withEnds(positions: number[], line: readonly Station[]): number[] {
  return [...positions, ...(line[0]?.at ?? []), ...(line.at(-1)?.at ?? [])];
}

function tubeIndices(rings: number, sides: number): number[] {
  const indices: number[] = [];
  const at = (ring: number, side: number) => ring * sides + (side % sides);
  const [first, last] = [rings * sides, rings * sides + 1];
  for (let side = 0; side < sides; side++) {
    for (let ring = 0; ring + 1 < rings; ring++) {
      const [a, b] = [at(ring, side), at(ring, side + 1)];
      const [c, d] = [at(ring + 1, side + 1), at(ring + 1, side)];
      indices.push(a, b, c, a, c, d);
    }
    indices.push(first, at(0, side + 1), at(0, side));
    indices.push(last, at(rings - 1, side), at(rings - 1, side + 1));
  }
  return indices;
}

function sampleLine(stations: readonly Station[], perSpan: number): Station[] {
  const get = (index: number) =>
    stations[Math.min(Math.max(index, 0), stations.length - 1)] as Station;
  const line: Station[] = [];
  for (let span = 0; span + 1 < stations.length; span++) {
    const four = [get(span - 1), get(span), get(span + 1), get(span + 2)] as const;
    for (let step = 0; step < perSpan; step++) line.push(between(four, step / perSpan));
  }
  line.push(get(stations.length - 1));
  return line;
}

function between(four: readonly [Station, Station, Station, Station], t: number): Station {
  const blend = (pick: (station: Station) => number) => {
    const [p0, p1, p2, p3] = four.map(pick) as [number, number, number, number];
    const a = 2 * p1;
    const b = p2 - p0;
    const c = 2 * p0 - 5 * p1 + 4 * p2 - p3;
    const d = 3 * p1 - p0 - 3 * p2 + p3;
    return (a + b * t + c * t ** 2 + d * t ** 3) / 2;
  };
  return {
    at: [blend((s) => s.at[0]), blend((s) => s.at[1]), blend((s) => s.at[2])],
    radius: blend((s) => s.radius),
  };
}

function tangentAt(line: readonly Station[], ring: number): Point {
  const before = line[Math.max(0, ring - 1)] as Station;
  const after = line[Math.min(line.length - 1, ring + 1)] as Station;
  return unit(minus(after.at, before.at));
}

function carried(
  across: Point,
  from: Station,
  fromTangent: Point,
  at: Point,
  tangent: Point,
): Point {
  const step = minus(at, from.at);
  const reflect = (v: Point, n: Point): Point => {
    const scale = (2 * dot(n, v)) / dot(n, n);
    return [v[0] - scale * n[0], v[1] - scale * n[1], v[2] - scale * n[2]];
  };
  const half = reflect(fromTangent, step);
  return unit(reflect(reflect(across, step), minus(tangent, half)));
}

function anyAcross(tangent: Point): Point {
  const axis: Point = Math.abs(tangent[0]) < 0.9 ? [1, 0, 0] : [0, 1, 0];
  return unit(cross(cross(tangent, axis), tangent));
}

const minus = (a: Point, b: Point): Point => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const dot = (a: Point, b: Point) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Point, b: Point): Point => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
function unit(v: Point): Point {
  const length = Math.hypot(...v);
  return [v[0] / length, v[1] / length, v[2] / length];
}
