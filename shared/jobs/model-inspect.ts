import * as z from 'zod';
import { mendingChoices, noChoices } from './mending-choices.js';
import { vector3 } from './geometry-values.js';

export const inspectInput = z.object({
  sourceKey: z.string(),
  /** The name the person gave the file, for messages. */
  fileName: z.string(),
  /** Storage folder that receives what the job writes. */
  outputPrefix: z.string(),
  choices: mendingChoices.default(noChoices),
});

export const meshFormats = ['stl-binary', 'stl-ascii', 'obj', '3mf'] as const;
export type MeshFormat = (typeof meshFormats)[number];

/** The counts and measures of a surface, before or after mending. */
export const surfaceState = z.object({
  triangles: z.number(),
  vertices: z.number(),
  /** Edges with a triangle on one side only. */
  openEdges: z.number(),
  /** Edges used by more than two triangles. */
  nonManifoldEdges: z.number(),
  /** Edges whose two triangles run the same way. */
  misorientedEdges: z.number(),
  duplicateFacets: z.number(),
  shells: z.number(),
  closed: z.boolean(),
  /**
   * Volume that the surface encloses. An open or contradictory surface encloses none: then it is what
   * it would enclose with its facets turned to agree and its holes closed flat, or 0.
   */
  volume: z.number(),
  area: z.number(),
  size: vector3,
  min: vector3,
});
export type SurfaceState = z.infer<typeof surfaceState>;

/** The steps of mending, in the order in which they are done. */
export const mendingKinds = [
  'weld',
  'drop-flat',
  'drop-duplicates',
  'split-edges',
  'split-vertices',
  'turn-facets',
  'turn-shells',
  'drop-shells',
  'stitch',
  'fill-holes',
  'unite',
  'remesh',
] as const;
export type MendingKind = (typeof mendingKinds)[number];

/** One step of mending that changed something. */
export const mendingStep = z.object({
  kind: z.enum(mendingKinds),
  /** How many vertices, facets, edges, shells or holes it touched; the sentence says which. */
  count: z.number().int().min(1),
  /** What was done, in the past tense, with its number. */
  sentence: z.string(),
});
export type MendingStep = z.infer<typeof mendingStep>;

/** A rim of open edges. */
export const holeReport = z.object({
  /** From 1, the longest rim first; the view mesh holds its rim as the line set `hole-<id>`. */
  id: z.number().int(),
  /** Length of the rim. */
  perimeter: z.number(),
  edges: z.number().int(),
  centre: vector3,
  /** Radius around the centre that holds the rim. */
  reach: z.number(),
  /** Whether the rim lies in a plane within the welding tolerance. */
  isFlat: z.boolean(),
  isFilled: z.boolean(),
});
export type HoleReport = z.infer<typeof holeReport>;

export const placeKinds = [
  'hole',
  'crossing',
  'non-manifold',
  'turned',
  'duplicate',
  'thin-wall',
  'far-from-original',
] as const;

/** A place worth looking at. */
export const problemPlace = z.object({
  kind: z.enum(placeKinds),
  at: vector3,
  /** Radius to show around it. */
  reach: z.number(),
  sentence: z.string(),
});
export type ProblemPlace = z.infer<typeof problemPlace>;

/** Distances from one surface to another, from samples: mean, 95th percentile, largest found. */
export const deviation = z.object({
  mean: z.number(),
  p95: z.number(),
  max: z.number(),
  samples: z.number().int(),
});
export type Deviation = z.infer<typeof deviation>;

/** Thickness from rays that go straight in from samples spread evenly over the surface. */
export const wallReport = z.object({
  samples: z.number().int(),
  min: z.number(),
  p5: z.number(),
  median: z.number(),
  max: z.number(),
  /** Equal bins from `from` to `to`; thicker walls than `to` are counted in the last one. */
  histogram: z.object({ from: z.number(), to: z.number(), counts: z.array(z.number().int()) }),
  thinnestAt: vector3,
});
export type WallReport = z.infer<typeof wallReport>;

/** A plane region of the surface. */
export const flatArea = z.object({
  area: z.number(),
  /** Outward, of unit length. */
  normal: vector3,
  centre: vector3,
});
export type FlatArea = z.infer<typeof flatArea>;

/** What planning needs to know of a solid. */
export const solidMeasures = z.object({
  /** Handles of all shells together; a ball has 0, a ring 1. */
  genus: z.number().int(),
  /** Null when rays met nothing. */
  wall: wallReport.nullable(),
  /** The largest first, at most 12, none below 1 % of the surface. */
  flats: z.array(flatArea),
  shortestEdge: z.number(),
  /** Longest side of the smallest shell. */
  smallestShell: z.number(),
  /** Pairs of triangles that cross each other; `complete` is false when counting was stopped. */
  crossings: z.object({ pairs: z.number().int(), complete: z.boolean() }),
});
export type SolidMeasures = z.infer<typeof solidMeasures>;

/** What a person has to decide before a plan can be made. */
export const ask = z.discriminatedUnion('kind', [
  /** Holes longer than the choice allows are still open. */
  z.object({
    kind: z.literal('fill-holes'),
    sentence: z.string(),
    count: z.number().int(),
    longest: z.number(),
  }),
  /** Mending cannot make it a solid; rebuilding the surface would. */
  z.object({ kind: z.literal('remesh'), sentence: z.string() }),
  /** The solid differs from the file by more than repairs may silently do: take it or not. */
  z.object({ kind: z.literal('accept'), sentence: z.string() }),
]);
export type Ask = z.infer<typeof ask>;

/**
 * What the file holds, what was done to it, and what came out. All lengths in file units: a person
 * decides the unit afterwards. The counts at the top level are those of the result.
 */
export const meshReport = surfaceState.extend({
  format: z.enum(meshFormats),
  fileBytes: z.number(),
  /** Facets as the file lists them, polygons counted as their triangles. */
  facetsRead: z.number(),
  /** The unit that the file states, when its format can. */
  fileUnit: z.object({ name: z.string(), millimetres: z.number().gt(0) }).nullable(),
  /** Items of a 3MF file or objects of an OBJ file, when there are several. */
  parts: z.array(z.object({ name: z.string(), facets: z.number(), isTaken: z.boolean() })),
  /** The surface as it came, welded exactly. */
  asRead: surfaceState,
  mending: z.array(mendingStep),
  /** At most 500, the longest rims. */
  holes: z.array(holeReport),
  holesFound: z.number().int(),
  choices: mendingChoices,
  /** How far the re-meshed surface lies from the one it replaces; null unless re-meshed. */
  remeshDeviation: deviation.nullable(),
  degenerateDropped: z.number(),
  /** Shells that bound a hollow inside another shell. */
  cavities: z.number(),
  /** Whether the file came inside out as a whole and was turned. */
  turnedOutward: z.boolean(),
  /** Null when there is no solid. */
  measures: solidMeasures.nullable(),
  /** The mesh for planning and for looking at, and how far it lies from the model. */
  proxy: z.object({ triangles: z.number(), deviation: deviation.nullable() }),
  /** At most 200, the most important first. */
  places: z.array(problemPlace),
  asks: z.array(ask),
  /** Whether a plan can be made; when not, `refusal` or `asks` say why. An `accept` comes with a solid. */
  plannable: z.boolean(),
  refusal: z.string().nullable(),
  /** Remarks for the person, in the order of their weight. */
  notes: z.array(z.string()),
});
export type MeshReport = z.infer<typeof meshReport>;

/** Whether a plan may be made of a revision: at once, or because a person accepted what mending changed. */
export function mayBePlanned(report: MeshReport, isAccepted: boolean): boolean {
  if (report.plannable) return true;
  return isAccepted && report.asks.length > 0 && report.asks.every((one) => one.kind === 'accept');
}

export const inspectOutput = z.object({
  report: meshReport,
  /** Storage keys; null when the mesh cannot be shown or planned. */
  files: z.object({
    solid: z.string().nullable(),
    /** GLB: mesh `model`, scalar `_wall` a vertex when thickness was measured, line sets `hole-<id>`. */
    view: z.string().nullable(),
    thumbnail: z.string().nullable(),
    /** The closed proxy for planning, at most 60 000 triangles. */
    proxy: z.string().nullable(),
  }),
  /** Triangles in the view mesh: what the browser shows when it is fewer than the model's. */
  viewTriangles: z.number(),
});
