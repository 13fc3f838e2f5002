import { dropUnusedVertices } from '../../shared/geometry/mesh/compact.js';
import { PointWelder } from '../../shared/geometry/mesh/point-welder.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** Words a facet: nine coordinates. */
const facetWords = 9;

/**
 * Takes facets as the bits of float32 corners, chunk by chunk, and welds them exactly: corners with
 * equal coordinates (-0 equals 0) become one vertex, facets with two corners in one vertex are left
 * out. Never holds all corners: with the result it needs at most about 50 bytes a facet of a closed
 * surface.
 */
export class FacetWelder {
  private readonly points: PointWelder;
  private indices: Uint32Array;
  private filled = 0;
  private facets = 0;

  /** @param facets how many are expected at most; more are taken too */
  constructor(facets: number) {
    // A closed mesh has about one vertex for two facets.
    this.points = new PointWelder(facets / 1.85);
    this.indices = new Uint32Array(3 * facets);
  }

  /** @param words nine words a facet; @param count facets to take from the start */
  take(words: Int32Array, count: number): void {
    this.reserve(count);
    const { indices } = this;
    let filled = this.filled;
    // Neighbours in a file share corners more often than not: the last facet is looked at first.
    let before = -1;
    for (let facet = 0, at = 0; facet < count; facet++, at += facetWords) {
      const a = this.corner(words, at, before);
      const b = this.corner(words, at + 3, before);
      const c = this.corner(words, at + 6, before);
      before = -1;
      if (a === b || b === c || c === a) continue;
      indices[filled] = a;
      indices[filled + 1] = b;
      indices[filled + 2] = c;
      before = at;
      filled += 3;
      this.filled = filled;
    }
    this.facets += count;
  }

  /** The vertex of the corner at `at`; `before` is where the last kept facet stands in `words`, or -1. */
  private corner(words: Int32Array, at: number, before: number): number {
    const x = words[at];
    const y = words[at + 1];
    const z = words[at + 2];
    if (before >= 0) {
      const { indices, filled } = this;
      if (words[before] === x && words[before + 1] === y && words[before + 2] === z)
        return indices[filled - 3];
      if (words[before + 3] === x && words[before + 4] === y && words[before + 5] === z)
        return indices[filled - 2];
      if (words[before + 6] === x && words[before + 7] === y && words[before + 8] === z)
        return indices[filled - 1];
    }
    return this.points.number(x, y, z);
  }

  private reserve(count: number): void {
    if (this.filled + 3 * count <= this.indices.length) return;
    const larger = new Uint32Array(Math.ceil(1.5 * (this.filled + 3 * count)));
    larger.set(this.indices.subarray(0, this.filled));
    this.indices = larger;
  }

  /** The welded mesh; the welder is used up. */
  finish(): { mesh: TriangleMesh; degenerateDropped: number } {
    const { filled, facets } = this;
    const indices = filled < this.indices.length ? this.indices.slice(0, filled) : this.indices;
    this.indices = indices;
    const mesh = { positions: this.points.finish(), indices };
    const degenerateDropped = facets - filled / 3;
    return { mesh: degenerateDropped > 0 ? dropUnusedVertices(mesh) : mesh, degenerateDropped };
  }
}
