import { parentPort } from 'node:worker_threads';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { makeSimpleModel } from './simple-model.js';

// The entry of the thread: a mesh comes in, its simple model goes out, null when it could not be made.
parentPort?.on('message', (mesh: TriangleMesh) => {
  const answer = (made: object | null) => parentPort?.postMessage(made);
  makeSimpleModel(mesh).then(answer, () => answer(null));
});
