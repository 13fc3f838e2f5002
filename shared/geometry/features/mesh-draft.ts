import { dropUnusedVertices } from '../mesh/compact.js';
import { type TriangleMesh } from '../mesh/triangle-mesh.js';
import { fromPlane } from '../sections/seam-plane.js';
import { type CapFrame } from './cap-frame.js';

/** A mesh that is being changed: it keeps given vertices, drops triangles and takes new ones. */
export class MeshDraft {
  private readonly added: number[] = [];
  private kept: { indices: Uint32Array; tags: Int32Array } = {
    indices: new Uint32Array(0),
    tags: new Int32Array(0),
  };
  private readonly indices: number[] = [];
  private readonly tags: number[] = [];

  constructor(private readonly positions: Float64Array) {}

  /** Takes the triangles of a mesh on the draft's own vertices for which `isKept` says so. Once only. */
  addTriangles({ indices, tags }: TriangleMesh, isKept: (triangle: number) => boolean): void {
    const count = indices.length / 3;
    const keptIndices = new Uint32Array(indices.length);
    const keptTags = new Int32Array(count);
    let filled = 0;
    for (let t = 0; t < count; t++) {
      if (!isKept(t)) continue;
      keptIndices[3 * filled] = indices[3 * t];
      keptIndices[3 * filled + 1] = indices[3 * t + 1];
      keptIndices[3 * filled + 2] = indices[3 * t + 2];
      if (tags) keptTags[filled] = tags[t];
      filled++;
    }
    this.kept = {
      indices: keptIndices.subarray(0, 3 * filled),
      tags: keptTags.subarray(0, filled),
    };
  }

  /** @returns the number of the new vertex */
  addPoint(point: ArrayLike<number>): number {
    this.added.push(point[0], point[1], point[2]);
    return (this.positions.length + this.added.length) / 3 - 1;
  }

  /** New vertices for an outline (flat xy on a face, mm) at a depth below the face, mm. */
  addLoop(frame: CapFrame, xy: Float64Array, depthMm: number): number[] {
    const { outward } = frame;
    return Array.from({ length: xy.length / 2 }, (_, i) => {
      const [x, y, z] = fromPlane(frame, xy[2 * i], xy[2 * i + 1]);
      return this.addPoint([
        x - depthMm * outward[0],
        y - depthMm * outward[1],
        z - depthMm * outward[2],
      ]);
    });
  }

  /** Joins two rings point by point; each quadrangle is parted from the first ring's point on. */
  addWall(from: readonly number[], to: readonly number[]): void {
    for (let i = 0; i < from.length; i++) {
      const j = (i + 1) % from.length;
      this.addTriangle(from[i], to[j], to[i], 0);
      this.addTriangle(from[i], from[j], to[j], 0);
    }
  }

  /** Triangles by the numbers of a list of vertices; those that name a vertex twice are left out. */
  addFace(corners: Uint32Array, vertices: readonly number[], tag: number): void {
    for (let i = 0; i < corners.length; i += 3) {
      const [a, b, c] = [vertices[corners[i]], vertices[corners[i + 1]], vertices[corners[i + 2]]];
      if (a !== b && b !== c && c !== a) this.addTriangle(a, b, c, tag);
    }
  }

  addTriangle(a: number, b: number, c: number, tag: number): void {
    this.indices.push(a, b, c);
    this.tags.push(tag);
  }

  /** Vertices that no triangle uses are left out; the others keep their order. */
  finish(): TriangleMesh {
    const { indices: kept, tags: keptTags } = this.kept;
    const indices = new Uint32Array(kept.length + this.indices.length);
    indices.set(kept);
    indices.set(this.indices, kept.length);
    const tags = new Int32Array(keptTags.length + this.tags.length);
    tags.set(keptTags);
    tags.set(this.tags, keptTags.length);
    const all = new Float64Array(this.positions.length + this.added.length);
    all.set(this.positions);
    all.set(this.added, this.positions.length);
    return dropUnusedVertices({ positions: all, indices, tags });
  }
}
