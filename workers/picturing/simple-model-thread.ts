import { parentPort } from 'node:worker_threads';
import type { SerializedBVH } from 'three-mesh-bvh';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { bvhOfPlainTree } from '../measuring/triangle-bvh.js';
import { makeSimpleModel, measureSimpleModel, type SimpleModel } from './simple-model.js';

/** A mesh to simplify, or the tree over the one before, to measure its simple model with. */
export type Question = { readonly mesh: TriangleMesh } | { readonly tree: SerializedBVH };

// The entry of the thread: every question gets one answer, in turn; null when there is none.
let before: { mesh: TriangleMesh; simple: SimpleModel } | undefined;
let turn: Promise<void> = Promise.resolve();

parentPort?.on('message', (question: Question) => {
  const post = (made: object | null) => parentPort?.postMessage(made);
  turn = turn.then(() => answer(question)).then(post, () => post(null));
});

async function answer(question: Question): Promise<object | null> {
  if ('tree' in question) {
    if (!before) return null;
    const { mesh, simple } = before;
    // Nothing is asked about it any more, and the tree need not be kept from being freed.
    before = undefined;
    return measureSimpleModel(simple.mesh, bvhOfPlainTree(mesh, question.tree));
  }
  before = undefined;
  const simple = await makeSimpleModel(question.mesh);
  before = { mesh: question.mesh, simple };
  return simple;
}
