import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { encodeMesh } from '../intake/mesh-file.js';
import { readStl } from '../intake/stl-reader.js';
import { inspectMesh } from '../measuring/mesh-report.js';
import { simplifyForView } from '../picturing/simplify-for-view.js';
import { drawThumbnail } from '../picturing/thumbnail.js';
import { makeViewGlb } from '../picturing/view-glb.js';
import { portionOf } from '../runtime/job-context.js';
import type { JobHandler } from '../runtime/job-handler.js';

/** Triangles of the mesh that a browser shows. */
const viewTriangles = 60_000;

/** Reads an uploaded file, reports on it, and stores the solid, the view mesh and the thumbnail. */
export const inspectModel: JobHandler<'model.inspect'> = async (input, { storage }, context) => {
  context.progress('Reading', 0);
  const bytes = await storage.read(input.sourceKey);
  const reading = readStl(bytes, input.fileName, (fraction) =>
    portionOf(context, 0.05, 0.15).progress('Reading', fraction),
  );
  const { report, solid, shown } = inspectMesh(
    { reading, fileName: input.fileName, fileBytes: bytes.length },
    portionOf(context, 0.15, 0.6),
  );

  const drawing = portionOf(context, 0.6, 1);
  const prefix = input.outputPrefix.replace(/\/+$/, '');
  const write = async (name: string, content: Uint8Array): Promise<string> => {
    const key = `${prefix}/${name}`;
    await storage.write(key, content);
    return key;
  };
  drawing.progress('Drawing', 0);
  const view = await viewOf(shown);
  drawing.progress('Drawing', 0.5);
  const viewKey = await write(
    'view.glb',
    await makeViewGlb({ meshes: [{ name: 'model', mesh: view }], triangleBudget: Infinity }),
  );
  drawing.progress('Drawing', 0.7);
  const thumbnail = await write('thumbnail.png', drawThumbnail(shown));
  drawing.progress('Drawing', 0.9);
  const solidKey = solid && (await write('solid.mesh', encodeMesh(solid)));
  return {
    report,
    files: { solid: solidKey, view: viewKey, thumbnail },
    viewTriangles: view.indices.length / 3,
  };
};

async function viewOf(mesh: TriangleMesh): Promise<TriangleMesh> {
  const { positions, indices } = await simplifyForView(mesh, viewTriangles);
  return { positions: Float64Array.from(positions), indices };
}
