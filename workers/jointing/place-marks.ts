import { type CapFeature } from '../../shared/geometry/features/cap-feature.js';
import { type CapFrame } from '../../shared/geometry/features/cap-frame.js';
import { dot } from '../../shared/geometry/vectors/vector3.js';
import { type Loops, loopsOf, regionOf } from '../solids/regions.js';
import { type Solids, type SolidScope } from '../solids/solid-kernel.js';
import { textOutlines } from './mark-font.js';
import { type PlanePoint } from './outlines.js';

/** Marks are so deep, mm; capitals so high at least and at most (common practice, from memory). */
const DEPTH_MM = 0.4;
const HEIGHTS_MM = [9, 7.5, 6];
/** Outlines of letters are that exact, mm. */
const LETTER_SIMPLE_MM = 0.03;
/** Marks keep clear of the face's edge and of sockets by this, mm. */
const CLEAR_MM = 1;
/** A face turned less than this out of the level has no "up" in it: its arrow becomes a word. */
const LEVEL_COS = 0.94;
/** Cells of the search for a free rectangle, mm; larger faces have larger cells. */
const CELL_MM = 0.75;
const MOST_CELLS = 160;

export interface MarkTask {
  readonly frame: CapFrame;
  /** The part of the face that belongs to the seam, in the cap's coordinates. */
  readonly region: Loops;
  readonly edgeBevelMm: number;
  /** Mouths of sockets and feet of pins, mm. */
  readonly obstacles: readonly (PlanePoint & { readonly radiusMm: number })[];
  readonly name: string;
  readonly neighbour: string;
}

/**
 * Engraved letters for one side of a seam: the piece's name, its neighbour's and an arrow to "up"
 * (on level faces the word UP or DOWN), upright when the object stands and readable from outside
 * the face. The fullest and largest layout that has room is taken; null when none has.
 */
export function markFeature(solids: Solids, task: MarkTask): CapFeature | null {
  return solids.withSolids((scope) => {
    const room = new FreeRoom(scope, task);
    const layouts = HEIGHTS_MM.map((heightMm) => layoutsFor(task, heightMm));
    for (const kind of layouts[0].keys())
      for (const { [kind]: layout } of layouts) {
        const place = room.placeFor(layout.widthMm, layout.heightMm);
        if (!place) continue;
        const loops = room.engraved(layout.contours, place);
        if (loops) return { levels: [0, DEPTH_MM].map((depthMm) => ({ loops, depthMm })) };
      }
    return null;
  });
}

interface Layout {
  /** From its lower left corner at the origin. */
  readonly contours: [number, number][][];
  readonly widthMm: number;
  readonly heightMm: number;
}

function layoutsFor({ frame, name, neighbour }: MarkTask, heightMm: number): Layout[] {
  const own = line(name, heightMm);
  const other = line(`to ${neighbour}`, 0.85 * heightMm < 6 ? 6 : 0.85 * heightMm);
  const side = sideMark(frame, heightMm);
  const full = beside(stacked(own, other), side);
  const inLine = beside(line(`${name} to ${neighbour}`, heightMm), side);
  return [full, inLine, beside(own, side), own];
}

function line(text: string, heightMm: number): Layout {
  const { contours, widthMm } = textOutlines(text, heightMm);
  return { contours, widthMm, heightMm };
}

/** The arrow to "up"; on a level face the word for the side that it looks to. */
function sideMark({ outward }: CapFrame, heightMm: number): Layout {
  if (Math.abs(outward[2]) >= LEVEL_COS) return line(outward[2] > 0 ? 'UP' : 'DOWN', heightMm);
  const [half, shaft, neck] = [0.32 * heightMm, 0.6, 0.5 * heightMm];
  const arrow: [number, number][] = [
    [half - shaft, 0],
    [half + shaft, 0],
    [half + shaft, neck],
    [2 * half, neck],
    [half, heightMm],
    [0, neck],
    [half - shaft, neck],
  ];
  return { contours: [arrow], widthMm: 2 * half, heightMm };
}

function beside(left: Layout, right: Layout): Layout {
  const gap = 0.4 * right.heightMm;
  const rise = Math.max(0, (left.heightMm - right.heightMm) / 2);
  return {
    contours: [...left.contours, ...shifted(right.contours, left.widthMm + gap, rise)],
    widthMm: left.widthMm + gap + right.widthMm,
    heightMm: Math.max(left.heightMm, right.heightMm),
  };
}

function stacked(upper: Layout, lower: Layout): Layout {
  const gap = 0.4 * lower.heightMm;
  const widthMm = Math.max(upper.widthMm, lower.widthMm);
  return {
    contours: [
      ...shifted(upper.contours, (widthMm - upper.widthMm) / 2, lower.heightMm + gap),
      ...shifted(lower.contours, (widthMm - lower.widthMm) / 2, 0),
    ],
    widthMm,
    heightMm: upper.heightMm + gap + lower.heightMm,
  };
}

function shifted(contours: Layout['contours'], x: number, y: number): Layout['contours'] {
  return contours.map((contour) => contour.map(([px, py]) => [px + x, py + y]));
}

/** Where marks may be: the face less its edge and sockets, in cells along "right" and "up". */
class FreeRoom {
  private readonly up: PlanePoint;
  private readonly right: PlanePoint;
  private readonly free;
  private readonly sums: Float64Array;
  private readonly cellMm: number = CELL_MM;
  private readonly across: number = 0;
  private readonly along: number = 0;
  private readonly areaMm2: number = 0;
  private readonly x0: number = 0;
  private readonly y0: number = 0;

  constructor(
    private readonly scope: SolidScope,
    { frame, region, edgeBevelMm, obstacles }: MarkTask,
  ) {
    this.up = upOn(frame);
    this.right = { x: this.up.y, y: 0 - this.up.x };
    const turned = region.map((loop) => this.toText(loop));
    let free = scope.keep(regionOf(scope, turned).offset(-(edgeBevelMm + CLEAR_MM), 'Miter', 2));
    for (const { x, y, radiusMm } of obstacles) {
      const [tx, ty] = this.toText(Float64Array.of(x, y));
      const disc = scope.keep(scope.CrossSection.circle(radiusMm + CLEAR_MM, 24));
      free = scope.keep(free.subtract(scope.keep(disc.translate([tx, ty]))));
    }
    this.free = free;
    this.sums = new Float64Array(0);
    // Narrower than the smallest letters: nothing need be looked for.
    if (scope.keep(free.offset(-0.45 * HEIGHTS_MM[HEIGHTS_MM.length - 1], 'Miter', 2)).isEmpty())
      return;
    this.areaMm2 = free.area();
    const { min, max } = free.bounds();
    const [width, height] = [max[0] - min[0], max[1] - min[1]];
    this.cellMm = Math.max(CELL_MM, Math.max(width, height) / MOST_CELLS);
    this.across = Math.ceil(width / this.cellMm);
    this.along = Math.ceil(height / this.cellMm);
    [this.x0, this.y0] = [min[0], min[1]];
    this.sums = this.sumsOf(free.toPolygons());
  }

  /** Lower left corner, in text coordinates, of the free rectangle nearest the middle. */
  placeFor(widthMm: number, heightMm: number): PlanePoint | null {
    const { cellMm, across, along } = this;
    if (widthMm * heightMm > this.areaMm2) return null;
    const wide = Math.ceil(widthMm / cellMm) + 1;
    const high = Math.ceil(heightMm / cellMm) + 1;
    let best: PlanePoint | null = null;
    let least = Infinity;
    for (let row = 0; row + high <= along; row++)
      for (let column = 0; column + wide <= across; column++) {
        const off = Math.hypot(column + wide / 2 - across / 2, row + high / 2 - along / 2);
        if (off >= least || !this.isFree(column, row, wide, high)) continue;
        least = off;
        best = {
          x: this.x0 + (column + 0.5) * cellMm,
          y: this.y0 + (row + 0.5) * cellMm,
        };
      }
    return best;
  }

  /** The contours placed, in the cap's coordinates; null when they do not quite have room. */
  engraved(contours: Layout['contours'], at: PlanePoint): Float64Array[] | null {
    const { scope } = this;
    if (contours.length === 0) return null;
    const letters = scope.keep(new scope.CrossSection(shifted(contours, at.x, at.y), 'NonZero'));
    if (scope.keep(letters.subtract(this.free)).area() > 1e-6) return null;
    return loopsOf(scope, letters, LETTER_SIMPLE_MM).map((loop) => this.toCap(loop));
  }

  private isFree(column: number, row: number, wide: number, high: number): boolean {
    const { sums } = this;
    const low = row * (this.across + 1) + column;
    const top = low + high * (this.across + 1);
    return sums[top + wide] - sums[top] - sums[low + wide] + sums[low] === wide * high;
  }

  /** Running sums of the cells whose middle is free: one row and column more than cells. */
  private sumsOf(polygons: readonly (readonly [number, number])[][]): Float64Array {
    const { across, along, cellMm, x0, y0 } = this;
    const sums = new Float64Array((across + 1) * (along + 1));
    for (let row = 0; row < along; row++) {
      const y = y0 + (row + 0.5) * cellMm;
      const crossings: number[] = [];
      for (const polygon of polygons)
        for (const [k, [ax, ay]] of polygon.entries()) {
          const [bx, by] = polygon[(k + 1) % polygon.length];
          if (ay <= y === by <= y) continue;
          crossings.push(ax + ((y - ay) / (by - ay)) * (bx - ax));
        }
      crossings.sort((a, b) => a - b);
      let inRow = 0;
      let passed = 0;
      for (let column = 0; column < across; column++) {
        const x = x0 + (column + 0.5) * cellMm;
        while (passed < crossings.length && crossings[passed] <= x) passed++;
        if (passed % 2 === 1) inRow++;
        const here = (row + 1) * (across + 1) + column + 1;
        sums[here] = sums[here - across - 1] + inRow;
      }
    }
    return sums;
  }

  private toText(loop: Float64Array): Float64Array {
    return this.map(loop, (x, y) => [
      x * this.right.x + y * this.right.y,
      x * this.up.x + y * this.up.y,
    ]);
  }

  private toCap(loop: Float64Array): Float64Array {
    return this.map(loop, (x, y) => [
      x * this.right.x + y * this.up.x,
      x * this.right.y + y * this.up.y,
    ]);
  }

  private map(loop: Float64Array, to: (x: number, y: number) => [number, number]): Float64Array {
    const mapped = new Float64Array(loop.length);
    for (let i = 0; i < loop.length; i += 2) mapped.set(to(loop[i], loop[i + 1]), i);
    return mapped;
  }
}

/** The way up on a face of the standing object; on level faces the way to the back. */
function upOn({ u, v, outward }: CapFrame): PlanePoint {
  const axis = Math.abs(outward[2]) >= LEVEL_COS ? ([0, 1, 0] as const) : ([0, 0, 1] as const);
  const [x, y] = [dot(axis, u), dot(axis, v)];
  const length = Math.hypot(x, y);
  return { x: x / length, y: y / length };
}
