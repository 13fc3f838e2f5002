import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { encodeMesh } from '../intake/mesh-file.js';
import { readStl } from '../intake/stl-reader.js';
import { inspectMesh, type Inspection } from '../measuring/mesh-report.js';
import { simplifyForView } from '../picturing/simplify-for-view.js';
import { drawThumbnail } from '../picturing/thumbnail.js';
import { makeViewGlb } from '../picturing/view-glb.js';
import { portionOf, type JobContext } from '../runtime/job-context.js';
import type { JobHandler } from '../runtime/job-handler.js';

/** Triangles of the mesh that a browser shows. */
const viewTriangles = 60_000;

/** Reads an uploaded file, reports on it, and stores the solid, the view mesh and the thumbnail. */
export const inspectModel: JobHandler<'model.inspect'> = async (input, { storage }, context) => {
  context.progress('Reading', 0);
  const { report, solid, shown } = inspectFile(
    await storage.read(input.sourceKey),
    input.fileName,
    portionOf(context, 0.02, 0.35),
  );

  // Of the time a large model takes, two thirds go into the view mesh (measured, 1 000 000 triangles).
  const drawing = portionOf(context, 0.35, 1);
  const prefix = input.outputPrefix.replace(/\/+$/, '');
  const write = async (name: string, content: Uint8Array): Promise<string> => {
    const key = `${prefix}/${name}`;
    await storage.write(key, content);
    return key;
  };
  drawing.progress('Drawing', 0);
  const view = await viewOf(shown);
  drawing.progress('Drawing', 0.72);
  const viewKey = await write(
    'view.glb',
    await makeViewGlb({ meshes: [{ name: 'model', mesh: view }], triangleBudget: Infinity }),
  );
  drawing.progress('Drawing', 0.82);
  const thumbnail = await write('thumbnail.png', drawThumbnail(shown));
  drawing.progress('Drawing', 0.94);
  const solidKey = solid && (await write('solid.mesh', encodeMesh(solid)));
  return {
    report,
    files: { solid: solidKey, view: viewKey, thumbnail, proxy: null },
    viewTriangles: view.indices.length / 3,
  };
};

/** A function of its own, so that the file's bytes and facets are let go before anything is drawn. */
function inspectFile(bytes: Uint8Array, fileName: string, context: JobContext): Inspection {
  const reading = readStl(bytes, fileName, (fraction) =>
    portionOf(context, 0, 0.2).progress('Reading', fraction),
  );
  return inspectMesh({ reading, fileName, fileBytes: bytes.length }, portionOf(context, 0.2, 1));
}

async function viewOf(mesh: TriangleMesh): Promise<TriangleMesh> {
  const { positions, indices } = await simplifyForView(mesh, viewTriangles);
  return { positions: new Float64Array(positions), indices };
}
