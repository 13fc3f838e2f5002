import {
  Document,
  Logger,
  NodeIO,
  type Primitive,
  type Accessor,
  type Buffer,
} from '@gltf-transform/core';
import { EXTMeshoptCompression } from '@gltf-transform/extensions';
import { MeshoptEncoder } from 'meshoptimizer';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { fewestTriangles, simplifyForView, type ViewMesh } from './simplify-for-view.js';

export interface ViewContent {
  readonly meshes: readonly {
    readonly name: string;
    readonly mesh: TriangleMesh;
    /**
     * One number a vertex, written as the attribute `_NAME` (glTF 2.0, 3.7.2.1: application-specific
     * names begin with an underscore); three's GLTFLoader offers it as `_name`. Only for a mesh
     * within the budget, whose vertices stay.
     */
    readonly scalars?: { readonly name: string; readonly values: Float32Array };
  }[];
  /** Line sets: flat xyz, two points a segment. */
  readonly lines?: readonly { readonly name: string; readonly positions: Float32Array }[];
  /** For all meshes together; shared by their triangle counts. */
  readonly triangleBudget: number;
}

/** glTF 2.0, 3.9.2: primitive modes. */
const linesMode = 1;
const trianglesMode = 4;

/** Positions are rounded to this share of the picture's extent, a power of two: it compresses better
 *  and is far below what a screen shows. */
const gridShare = 2 ** -17;

/**
 * A GLB for the viewer, compressed with EXT_meshopt_compression: one node and mesh a name, in the order
 * given, triangles indexed, no normals; line sets as LINES. Coordinates stay in the frame and unit of
 * the input (no transform on any node), so a viewer may move nodes freely.
 */
export async function makeViewGlb(content: ViewContent): Promise<Uint8Array> {
  await MeshoptEncoder.ready;
  const document = new Document().setLogger(new Logger(Logger.Verbosity.SILENT));
  const buffer = document.createBuffer();
  const scene = document.createScene();
  const step = gridStep(content);
  const add = (name: string, primitive: Primitive) =>
    scene.addChild(
      document.createNode(name).setMesh(document.createMesh(name).addPrimitive(primitive)),
    );

  const total = content.meshes.reduce((sum, { mesh }) => sum + mesh.indices.length / 3, 0);
  const share = Math.min(1, content.triangleBudget / Math.max(1, total));
  for (const { name, mesh, scalars } of content.meshes) {
    const budget = Math.max(fewestTriangles, Math.floor((mesh.indices.length / 3) * share));
    const simple = await simplifyForView(mesh, budget);
    const view = orderForCompression(simple, scalars?.values);
    roundToGrid(view.positions, step);
    const primitive = document
      .createPrimitive()
      .setMode(trianglesMode)
      .setAttribute('POSITION', pointsOf(document, buffer, view.positions))
      .setIndices(
        document
          .createAccessor()
          .setType('SCALAR')
          .setArray(view.indices as Uint32Array<ArrayBuffer>)
          .setBuffer(buffer),
      );
    if (scalars && view.scalars)
      primitive.setAttribute(
        `_${scalars.name}`,
        document.createAccessor().setType('SCALAR').setArray(view.scalars).setBuffer(buffer),
      );
    add(name, primitive);
  }
  for (const { name, positions } of content.lines ?? []) {
    const rounded = positions.slice();
    roundToGrid(rounded, step);
    const primitive = document
      .createPrimitive()
      .setMode(linesMode)
      .setAttribute('POSITION', pointsOf(document, buffer, rounded));
    add(name, primitive);
  }

  document.createExtension(EXTMeshoptCompression).setRequired(true);
  const io = new NodeIO()
    .setLogger(document.getLogger())
    .registerExtensions([EXTMeshoptCompression])
    .registerDependencies({ 'meshopt.encoder': MeshoptEncoder });
  return await io.writeBinary(document);
}

function pointsOf(document: Document, buffer: Buffer, positions: Float32Array): Accessor {
  return document
    .createAccessor()
    .setType('VEC3')
    .setArray(positions as Float32Array<ArrayBuffer>)
    .setBuffer(buffer);
}

/** Numbers vertices in the order in which triangles meet them and leaves out the unused ones. */
function orderForCompression(
  view: ViewMesh,
  values?: Float32Array,
): ViewMesh & { scalars?: Float32Array<ArrayBuffer> } {
  const indices = view.indices.slice();
  const [remap, count] = MeshoptEncoder.reorderMesh(indices, true, true);
  const positions = new Float32Array(3 * count);
  const scalars = values && new Float32Array(count);
  for (let i = 0; i < remap.length; i++) {
    const to = remap[i];
    if (to >= count) continue;
    for (let axis = 0; axis < 3; axis++) positions[3 * to + axis] = view.positions[3 * i + axis];
    if (scalars && values) scalars[to] = values[i];
  }
  return { positions, indices, ...(scalars && { scalars }) };
}

function gridStep({ meshes, lines = [] }: ViewContent): number {
  let low = Infinity;
  let high = -Infinity;
  const all = [...meshes.map(({ mesh }) => mesh.positions), ...lines.map((set) => set.positions)];
  for (const positions of all)
    for (let i = 0; i < positions.length; i++) {
      if (positions[i] < low) low = positions[i];
      if (positions[i] > high) high = positions[i];
    }
  return high > low ? 2 ** Math.floor(Math.log2((high - low) * gridShare)) : 0;
}

function roundToGrid(positions: Float32Array, step: number): void {
  if (step === 0) return;
  for (let i = 0; i < positions.length; i++) positions[i] = Math.round(positions[i] / step) * step;
}
