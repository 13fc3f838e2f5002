import { encodeMesh } from '../intake/mesh-file.js';
import { type Inspection, inspectFile } from '../inspecting/inspect-file.js';
import { pictureInspection } from '../inspecting/picture-inspection.js';
import { portionOf } from '../runtime/job-context.js';
import type { JobHandler } from '../runtime/job-handler.js';
import { loadSolids } from '../solids/solid-kernel.js';

/** Reads an uploaded file, mends it, reports on it, and stores the solid, the picture and the proxy. */
export const inspectModel: JobHandler<'model.inspect'> = async (input, { storage }, context) => {
  const { sourceKey, fileName, choices } = input;
  context.progress('Reading', 0);
  const solids = await loadSolids();
  // The bytes stay in here, so that they are let go before anything is drawn.
  const inspect = async (): Promise<Inspection> =>
    inspectFile(
      { bytes: await storage.read(sourceKey), fileName, choices },
      { solids, context: portionOf(context, 0.02, 0.6) },
    );
  const inspection = await inspect();
  const picture = await pictureInspection(inspection, portionOf(context, 0.6, 0.95));

  context.progress('Storing', 0.95);
  const prefix = input.outputPrefix.replace(/\/+$/, '');
  const write = async (name: string, content: Uint8Array): Promise<string> => {
    const key = `${prefix}/${name}`;
    await storage.write(key, content);
    return key;
  };
  const { solid } = inspection;
  const { proxy } = picture;
  return {
    report: picture.report,
    files: {
      solid: solid && (await write('solid.mesh', encodeMesh(solid))),
      view: await write('view.glb', picture.view),
      thumbnail: await write('thumbnail.png', picture.thumbnail),
      proxy: proxy && (await write('proxy.mesh', encodeMesh(proxy))),
    },
    viewTriangles: picture.viewTriangles,
  };
};
