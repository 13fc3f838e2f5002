import { type CrossSection, type Solids, type SolidScope } from './solid-kernel.js';

/** Flat xy, mm; outers counter-clockwise, holes clockwise. */
export type Loops = readonly Float64Array[];

/** Points of an outline closer to its neighbours' line than this are left out, mm. */
const SIMPLE_MM = 2e-3;
/** The edge of a bevelled face need not follow every facet, mm. */
const INSET_SIMPLE_MM = 0.02;
/** Corners sharper than this are cut off when a region is shrunk. */
const MITER_LIMIT = 2;
/** Parts of a region smaller than this are crumbs of rounding, mm². */
const CRUMB_MM2 = 1e-3;

/** The overlap of two regions shrunk by a distance, mm; empty when nothing is left. */
export function insetOverlap(solids: Solids, one: Loops, other: Loops, byMm: number) {
  return solids.withSolids((scope) => {
    const shared = scope.keep(regionOf(scope, one).intersect(regionOf(scope, other)));
    const inset = scope.keep(shared.offset(-byMm, 'Miter', MITER_LIMIT));
    return loopsOf(scope, inset, INSET_SIMPLE_MM);
  });
}

/** A region of the plane in a scope, from loops of either direction. */
export function regionOf(scope: SolidScope, loops: Loops): CrossSection {
  // The constructor cannot take an empty list; a point bounds nothing as well.
  const drawn = loops.length > 0 ? loops : [new Float64Array(6)];
  const polygons = drawn.map((loop) =>
    Array.from({ length: loop.length / 2 }, (_, i): [number, number] => [
      loop[2 * i],
      loop[2 * i + 1],
    ]),
  );
  return scope.keep(new scope.CrossSection(polygons, 'EvenOdd'));
}

/** The outlines of a region without crumbs and needless points. */
export function loopsOf(
  scope: SolidScope,
  region: CrossSection,
  simpleMm = SIMPLE_MM,
): Float64Array[] {
  return scope
    .keep(region.simplify(simpleMm))
    .toPolygons()
    .filter((polygon) => polygon.length >= 3)
    .map((polygon) => Float64Array.from(polygon.flat()))
    .filter((loop) => Math.abs(areaOf(loop)) > CRUMB_MM2);
}

function areaOf(loop: Float64Array): number {
  let doubled = 0;
  for (let i = 0, j = loop.length - 2; i < loop.length; j = i, i += 2)
    doubled += loop[j] * loop[i + 1] - loop[j + 1] * loop[i];
  return doubled / 2;
}
