import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { makeSimpleModel, type SimpleModel } from './simple-model.js';

/** Smaller meshes are simplified sooner than they are handed over. Own choice. */
const fewestForThread = 200_000;
/** Shared memory that is kept at most between two meshes, bytes: 5 million triangles. Own choice. */
const mostKept = 2 ** 27;

const fromSource = import.meta.url.endsWith('.ts');
const entry = new URL(`./simple-model-thread.${fromSource ? 'ts' : 'js'}`, import.meta.url);
const register = new URL('../ts-register.mjs', import.meta.url);

type Settle = (made: SimpleModel | null) => void;

let thread: Worker | undefined;
/** Who waits for the mesh that the thread is busy with. */
let waiting: Settle | undefined;
let shared = new SharedArrayBuffer(0);
const begun = new WeakMap<TriangleMesh, Promise<SimpleModel | null>>();

/**
 * Begins to simplify a large closed mesh in a thread of its own, beside what the caller does next, which
 * may be synchronous. Does nothing for a small mesh, while the thread is busy with another one, or where
 * there is one processor only. The mesh is copied; nobody may change it any more.
 */
export function beginSimplifying(mesh: TriangleMesh): void {
  if (waiting || mesh.indices.length / 3 < fewestForThread || availableParallelism() < 2) return;
  begun.set(mesh, new Promise((settle) => ask(mesh, settle)));
}

/** The simple model of a mesh of more than 60 000 triangles: the one begun, or made here and now. */
export async function simpleModelOf(mesh: TriangleMesh): Promise<SimpleModel> {
  const promised = begun.get(mesh);
  if (!promised) return await makeSimpleModel(mesh);
  // Only while someone waits does the thread keep the process alive.
  thread?.ref();
  const made = await promised;
  thread?.unref();
  return made ?? (await makeSimpleModel(mesh));
}

/** Ends the thread; what it was busy with is made by whoever asks for it. The next mesh starts another. */
export async function endSimplifying(): Promise<void> {
  await thread?.terminate();
}

function ask(mesh: TriangleMesh, settle: Settle): void {
  thread ??= startThread();
  waiting = settle;
  thread.postMessage(copyShared(mesh));
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
  const settle = (made: SimpleModel | null) => {
    waiting?.(made);
    waiting = undefined;
  };
  started.on('message', settle);
  // An error ends the thread, so that this comes in every case; whoever asked makes the model and meets it.
  started.on('error', () => {});
  started.on('exit', () => {
    thread = undefined;
    settle(null);
  });
  started.unref();
  return started;
}
