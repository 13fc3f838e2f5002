import { boundingBox } from '../../shared/geometry/mesh/measure.js';
import { matesOf, surfacesOf } from '../../shared/geometry/mesh/edge-mates.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import type { MendingKind, MendingStep, ProblemPlace } from '../../shared/jobs/model-inspect.js';
import { countOf } from '../intake/refusal-words.js';
import { type JobContext, silentContext } from '../runtime/job-context.js';
import { dropDuplicates } from './drop-duplicates.js';
import { flipSlivers } from './flip-slivers.js';
import type { Mended } from './mending.js';
import { splitAllContacts } from './split-contacts.js';
import { stitchRims } from './stitch-rims.js';
import { turnFacets, turnOpenSurfaces } from './turn-facets.js';
import { weldRims } from './weld-rims.js';

/**
 * Welding and stitching tolerances as shares of the box's diagonal, tried in turn. The largest is a
 * hundredth of a millimetre on a metre: below what any printer shows, above what export in few digits
 * moves. Own choice.
 */
const weldShares = [1e-7, 1e-6, 1e-5];
/** A float32 coordinate has 24 binary digits; two roundings apart. */
const singleStep = 2 ** -22;
/** Triangles lower than this share of the diagonal have no area worth the name. */
const sliverShare = 1e-9;
const mostPlaces = 50;

/**
 * Mends how the triangles of a welded mesh hang together without changing the shape: welds rims
 * within a tolerance, drops facets without area and duplicates, takes apart what only touches, turns
 * facets that disagree, stitches T-junctions. Leaves holes. Does not change its input; a sound mesh
 * comes back itself. Every change is counted in a step.
 * @param mesh exactly welded, no triangle names a vertex twice
 */
export function mendTopology(mesh: TriangleMesh, context: JobContext = silentContext): Mended {
  const work = new Mending(mesh, context);
  if (matesOf(mesh).closed) {
    // Facets without area and touching vertices are all that a closed surface can have.
    work.flip();
    work.split();
    return work.result();
  }
  work.weld();
  work.dropDuplicates();
  work.flip();
  work.split();
  work.turn();
  work.stitch();
  return work.result();
}

class Mending {
  private mesh: TriangleMesh;
  private readonly steps: MendingStep[] = [];
  private readonly places: ProblemPlace[] = [];
  private readonly diagonal: number;
  private readonly tolerances: readonly number[];

  constructor(
    mesh: TriangleMesh,
    private readonly context: JobContext,
  ) {
    this.mesh = mesh;
    const { min, max, size } = boundingBox(mesh.positions);
    this.diagonal = Math.hypot(...size);
    const farthest = Math.max(...min.map(Math.abs), ...max.map(Math.abs));
    const least = 2 * farthest * singleStep;
    const largest = Math.max(least, weldShares.at(-1)! * this.diagonal);
    this.tolerances = [
      ...new Set(
        weldShares.map((share) => Math.min(largest, Math.max(least, share * this.diagonal))),
      ),
    ];
  }

  result(): Mended {
    return { mesh: this.mesh, steps: this.steps, places: this.places };
  }

  weld(): void {
    this.context.progress('Mending', 0.1);
    const welded = weldRims(this.mesh, this.tolerances);
    if (!welded) return;
    this.mesh = welded.mesh;
    this.note(
      'weld',
      welded.joined,
      `${countOf(welded.joined, 'vertex', 'vertices')} on open edges lay within a hair of another and ${were(welded.joined)} joined with it.`,
    );
  }

  dropDuplicates(): void {
    this.context.progress('Mending', 0.3);
    const { mesh, dropped } = dropDuplicates(this.mesh);
    if (dropped === 0) return;
    this.mesh = mesh;
    this.note(
      'drop-duplicates',
      dropped,
      `${countOf(dropped, 'facet')} ${dropped === 1 ? 'lay on another one or had' : 'lay on others or had'} no thickness, and ${were(dropped)} dropped.`,
    );
  }

  flip(): void {
    this.context.progress('Mending', 0.4);
    const { mesh, flipped } = flipSlivers(this.mesh, sliverShare * this.diagonal);
    if (flipped === 0) return;
    this.mesh = mesh;
    this.note(
      'drop-flat',
      flipped,
      `${countOf(flipped, 'facet')} without area ${were(flipped)} taken out and the surface closed over ${flipped === 1 ? 'it' : 'them'}.`,
    );
  }

  split(): void {
    this.context.progress('Mending', 0.5);
    const { mesh, edges, vertices, at } = splitAllContacts(this.mesh);
    if (edges + vertices === 0) return;
    this.mesh = mesh;
    for (const place of at)
      this.place('non-manifold', place, 'Here surfaces touched in an edge. They were taken apart.');
    if (edges > 0)
      this.note(
        'split-edges',
        edges,
        `${countOf(edges, 'edge')} shared by more than two facets ${were(edges)} taken apart into surfaces of their own.`,
      );
    if (vertices > 0)
      this.note(
        'split-vertices',
        vertices,
        `${countOf(vertices, 'corner')} where surfaces only touched ${were(vertices)} taken apart.`,
      );
  }

  turn(): void {
    this.context.progress('Mending', 0.7);
    const turned = turnFacets(this.mesh);
    this.mesh = turned.mesh;
    if (turned.turned > 0)
      this.note(
        'turn-facets',
        turned.turned,
        `${countOf(turned.turned, 'facet')} faced the wrong way and ${were(turned.turned)} turned to agree with ${turned.turned === 1 ? 'its' : 'their'} neighbours.`,
      );
    for (const triangle of turned.examples)
      this.place(
        'turned',
        this.middleOf(triangle),
        'A facet here faced the wrong way. It was turned.',
      );
    for (const side of turned.contradictions.slice(0, mostPlaces))
      this.place(
        'non-manifold',
        this.middleOf(Math.floor(side / 3)),
        'Here the surface has one side only: its facets cannot agree on what is outside.',
      );
    const { mates, closed } = matesOf(this.mesh);
    if (closed) return;
    const outward = turnOpenSurfaces(this.mesh, surfacesOf(this.mesh), mates);
    this.mesh = outward.mesh;
    if (outward.turned > 0)
      this.note(
        'turn-shells',
        outward.turned,
        `${countOf(outward.turned, 'open surface')} faced inward and ${were(outward.turned)} turned.`,
      );
  }

  stitch(): void {
    this.context.progress('Mending', 0.85);
    const { mesh, stitched } = stitchRims(this.mesh, this.tolerances.at(-1)!);
    if (stitched === 0) return;
    this.mesh = mesh;
    this.note(
      'stitch',
      stitched,
      `${countOf(stitched, 'vertex', 'vertices')} that lay on the edge of a neighbour ${were(stitched)} stitched into it.`,
    );
    // New neighbours may touch elsewhere, or face the other way.
    this.split();
    this.turn();
  }

  private note(kind: MendingKind, count: number, sentence: string): void {
    this.steps.push({ kind, count, sentence });
  }

  private place(kind: ProblemPlace['kind'], at: readonly number[], sentence: string): void {
    if (this.places.filter((place) => place.kind === kind).length >= mostPlaces) return;
    const [x, y, z] = at;
    this.places.push({ kind, at: [x, y, z], reach: 0.02 * this.diagonal, sentence });
  }

  private middleOf(triangle: number): number[] {
    const { positions, indices } = this.mesh;
    const [a, b, c] = [0, 1, 2].map((corner) => 3 * indices[3 * triangle + corner]);
    return [0, 1, 2].map((k) => (positions[a + k] + positions[b + k] + positions[c + k]) / 3);
  }
}

function were(count: number): string {
  return count === 1 ? 'was' : 'were';
}
