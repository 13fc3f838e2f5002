import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { MeshBVH } from 'three-mesh-bvh';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { plainTree } from '../measuring/triangle-bvh.js';
import {
  makeSimpleModel,
  measureSimpleModel,
  type SimpleMeasures,
  type SimpleModel,
} from './simple-model.js';
import type { Question } from './simple-model-thread.js';

/** Smaller meshes are simplified sooner than they are handed over. Own choice. */
const fewestForThread = 200_000;
/** Shared memory that is kept at most between two meshes, bytes: 5 million triangles. Own choice. */
const mostKept = 2 ** 27;

const fromSource = import.meta.url.endsWith('.ts');
const entry = new URL(`./simple-model-thread.${fromSource ? 'ts' : 'js'}`, import.meta.url);
const register = new URL('../ts-register.mjs', import.meta.url);

/** Asked and not answered yet, in the order in which the thread answers. */
const waiting: ((made: object | null) => void)[] = [];
/** The mesh that the thread was given last, while its simple model can still be measured. */
let given: WeakRef<TriangleMesh> | undefined;
let thread: Worker | undefined;
let shared = new SharedArrayBuffer(0);
const begun = new WeakMap<TriangleMesh, Promise<SimpleModel | null>>();
const begunMeasures = new WeakMap<MeshBVH, Promise<SimpleMeasures | null>>();

/**
 * Begins to simplify a large closed mesh in a thread of its own, beside what the caller does next, which
 * may be synchronous. Does nothing for a small mesh, while the thread is busy with another one, or where
 * there is one processor only. The mesh is copied; nobody may change it any more.
 */
export function beginSimplifying(mesh: TriangleMesh): void {
  if (waiting.length > 0 || mesh.indices.length / 3 < fewestForThread) return;
  if (availableParallelism() < 2) return;
  begun.set(mesh, ask<SimpleModel>({ mesh: copyShared(mesh) }));
  given = new WeakRef(mesh);
}

/**
 * Begins to measure the simple model of a mesh that was begun last, when the thread has made it. Does
 * nothing for any other mesh. @param bvh over `mesh`; copied, unless it is in shared memory
 */
export function beginMeasuring(mesh: TriangleMesh, bvh: MeshBVH): void {
  if (mesh !== given?.deref()) return;
  given = undefined;
  begunMeasures.set(bvh, ask<SimpleMeasures>({ tree: plainTree(bvh) }));
}

/** The simple model of a mesh of more than 60 000 triangles: the one begun, or made here and now. */
export async function simpleModelOf(mesh: TriangleMesh): Promise<SimpleModel> {
  return (await answerOf(begun.get(mesh))) ?? (await makeSimpleModel(mesh));
}

/** What is measured on a mesh's simple model: as it was begun with this tree, or measured here and now. */
export async function measuresOf(simple: SimpleModel, bvh: MeshBVH): Promise<SimpleMeasures> {
  return (await answerOf(begunMeasures.get(bvh))) ?? measureSimpleModel(simple.mesh, bvh);
}

/** Ends the thread; what it was busy with is made by whoever asks for it. The next mesh starts another. */
export async function endSimplifying(): Promise<void> {
  await thread?.terminate();
}

function ask<Answer>(question: Question): Promise<Answer | null> {
  thread ??= startThread();
  thread.postMessage(question);
  return new Promise((settle) => waiting.push(settle as (made: object | null) => void));
}

async function answerOf<Answer>(asked: Promise<Answer | null> | undefined): Promise<Answer | null> {
  if (!asked) return null;
  // Only while someone waits does the thread keep the process alive.
  thread?.ref();
  const answer = await asked;
  thread?.unref();
  return answer;
}

/** A copy that both threads see, in memory that is kept: touching fresh memory costs more than copying. */
function copyShared({ positions, indices }: TriangleMesh): TriangleMesh {
  const bytes = positions.byteLength + indices.byteLength;
  const room = shared.byteLength < bytes ? new SharedArrayBuffer(bytes) : shared;
  if (bytes <= mostKept) shared = room;
  const copy = {
    positions: new Float64Array(room, 0, positions.length),
    indices: new Uint32Array(room, positions.byteLength, indices.length),
  };
  copy.positions.set(positions);
  copy.indices.set(indices);
  return copy;
}

/** One thread for all meshes of this one, in turn; it ends with the thread or process that began it. */
function startThread(): Worker {
  // A thread does not inherit tsx, see ts-register.mjs; and no flag of the process is meant for it.
  const started = new Worker(entry, { execArgv: fromSource ? ['--import', register.href] : [] });
  started.on('message', (made: object | null) => waiting.shift()?.(made));
  // An error ends the thread, so that this comes in every case; whoever asked makes it and meets it.
  started.on('error', () => {});
  started.on('exit', () => {
    thread = undefined;
    given = undefined;
    for (const settle of waiting.splice(0)) settle(null);
  });
  started.unref();
  return started;
}
