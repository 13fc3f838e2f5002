import * as z from 'zod';
import { vector3 } from './recipe.js';

export const inspectInput = z.object({
  sourceKey: z.string(),
  /** The name the person gave the file, for messages. */
  fileName: z.string(),
  /** Storage folder that receives what the job writes. */
  outputPrefix: z.string(),
});

/** What the file holds. All lengths in file units: a person decides the unit afterwards. */
export const meshReport = z.object({
  format: z.enum(['stl-binary', 'stl-ascii']),
  fileBytes: z.number(),
  /** Facets as the file lists them. */
  facetsRead: z.number(),
  /** Triangles and vertices of the solid after welding and dropping. */
  triangles: z.number(),
  vertices: z.number(),
  degenerateDropped: z.number(),
  duplicateFacets: z.number(),
  /** Directed edges without an opposite partner. */
  openEdges: z.number(),
  /** Undirected edges used by more than two triangles. */
  nonManifoldEdges: z.number(),
  /** Edges whose two triangles run the same way. */
  misorientedEdges: z.number(),
  shells: z.number(),
  /** Shells that bound a hollow inside another shell. */
  cavities: z.number(),
  closed: z.boolean(),
  /** Whether the file came inside out and was turned. */
  turnedOutward: z.boolean(),
  volume: z.number(),
  area: z.number(),
  size: vector3,
  min: vector3,
  /** Whether a plan can be made; when not, `refusal` says why in a sentence. */
  plannable: z.boolean(),
  refusal: z.string().nullable(),
  /** Remarks for the person, in the order of their weight. */
  notes: z.array(z.string()),
});
export type MeshReport = z.infer<typeof meshReport>;

export const inspectOutput = z.object({
  report: meshReport,
  /** Storage keys; null when the mesh cannot be shown or planned. */
  files: z.object({
    solid: z.string().nullable(),
    view: z.string().nullable(),
    thumbnail: z.string().nullable(),
  }),
  /** Triangles in the view mesh: what the browser shows when it is fewer than the model's. */
  viewTriangles: z.number(),
});
