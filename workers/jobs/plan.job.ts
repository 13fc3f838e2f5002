import { scaleMesh } from '../../shared/geometry/mesh/measure.js';
import { makePieces } from '../building/make-pieces.js';
import { decodeMesh } from '../intake/mesh-file.js';
import { supportLines } from '../picturing/support-lines.js';
import { makeViewGlb } from '../picturing/view-glb.js';
import { type JobHandler } from '../runtime/job-handler.js';
import { loadSolids } from '../solids/solid-kernel.js';

/** Triangles of all pieces together that a browser turns smoothly. Common practice, no source. */
const VIEW_TRIANGLES = 150_000;

/** From a stored solid to proven pieces, the files of the ZIP and the picture of the plan. */
export const makePlan: JobHandler<'plan.make'> = async (input, { storage }, context) => {
  context.progress('Reading the model', 0);
  const start = performance.now();
  const [solid, solids] = await Promise.all([storage.read(input.solidKey), loadSolids()]);
  const mesh = scaleMesh(decodeMesh(solid), input.millimetresPerUnit);
  const parseMs = performance.now() - start;
  const keyOf = (name: string) => `${input.outputPrefix}/${name}`;
  const made = await makePieces(
    {
      mesh,
      modelName: input.modelName,
      millimetresPerUnit: input.millimetresPerUnit,
      spaces: [input.space, ...input.otherSpaces],
      wishes: input.wishes,
      joints: input.joints,
      material: input.material,
      orientations: input.orientations,
      seed: input.seed,
      tree: input.tree,
    },
    {
      solids,
      files: {
        write: (name, bytes) => storage.write(keyOf(name), bytes),
        read: (name) => storage.read(keyOf(name)),
      },
      context,
    },
  );
  context.throwIfCancelled();
  context.progress('Drawing the plan', 0.95);
  const view = await makeViewGlb({
    meshes: made.bodies,
    lines: [
      ...made.seams.map((seam, index) => ({
        name: `seam-${index + 1}`,
        positions: seam.outline,
      })),
      ...made.plan.pieces.flatMap((piece, index) =>
        supportLines(piece, made.bodies[index].mesh, input.material),
      ),
    ],
    triangleBudget: VIEW_TRIANGLES,
  });
  await storage.write(keyOf('view.glb'), view);
  context.progress('Drawing the plan', 1);
  return {
    ...made.plan,
    timingsMs: { parse: parseMs, weld: 0, inspect: 0, ...made.timingsMs },
    files: {
      view: keyOf('view.glb'),
      archive: made.archive.map(({ name, bytes }) => ({ name, key: keyOf(name), bytes })),
    },
  };
};
