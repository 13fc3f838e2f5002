import { usualJoints } from '../../../shared/jobs/joint-plan.js';
import { usualMaterial } from '../../../shared/jobs/material-profile.js';
import { usualWishes } from '../../../shared/jobs/plan-wishes.js';
import { mkdir, writeFile } from 'node:fs/promises';
import { dirname } from 'node:path';
import type { RowDataPacket } from 'mysql2/promise';
import { noChoices } from '../../../shared/jobs/mending-choices.js';
import type { JobError, JobMap, JobState } from '../../../shared/jobs/job-map.js';
import type { SurfaceState } from '../../../shared/jobs/model-inspect.js';
import type { ApiClient } from './api-client.js';
import type { TestProduct } from './test-product.js';

/** A binary STL with this many empty facets: enough to be let in. */
export function stlBytes(facets = 4): Buffer {
  const bytes = Buffer.alloc(84 + 50 * facets);
  bytes.writeUInt32LE(facets, 80);
  return bytes;
}

/** Uploads a model. @returns the answer's body */
export async function upload(client: ApiClient, fileName = 'heron.stl') {
  const response = await client
    .request('post', '/api/models')
    .attach('file', stlBytes(), { filename: fileName });
  if (response.status !== 201) throw new Error(`upload: ${response.status} ${response.text}`);
  return response.body as { id: string; revision: { id: string; job: { id: string } } };
}

/** Does what a worker does with the row of a job when it is through. */
export async function finishJob(
  { database }: TestProduct,
  jobId: string,
  end: { state: JobState; output?: unknown; error?: JobError },
): Promise<void> {
  await database.pool.query(
    'UPDATE jobs SET state = ?, output = ?, error = ?, fraction = 1, finished_at = NOW(3) WHERE id = ?',
    [end.state, jsonOrNull(end.output), jsonOrNull(end.error), jobId],
  );
}

const jsonOrNull = (value: unknown) => (value === undefined ? null : JSON.stringify(value));

export async function inputOf<N extends 'model.inspect' | 'plan.make'>(
  { database }: TestProduct,
  jobId: string,
): Promise<JobMap[N]['input']> {
  const [rows] = await database.pool.query<RowDataPacket[]>('SELECT input FROM jobs WHERE id = ?', [
    jobId,
  ]);
  return rows[0]?.['input'] as JobMap[N]['input'];
}

async function put({ storage }: TestProduct, key: string, bytes: Buffer): Promise<void> {
  await mkdir(dirname(storage.pathOf(key)), { recursive: true });
  await writeFile(storage.pathOf(key), bytes);
}

/** What an inspection of a box of 300 × 400 × 500 file units brings. */
export async function inspectionResult(
  product: TestProduct,
  jobId: string,
  changes: Partial<JobMap['model.inspect']['output']['report']> = {},
): Promise<JobMap['model.inspect']['output']> {
  const { outputPrefix } = await inputOf<'model.inspect'>(product, jobId);
  const files = {
    solid: `${outputPrefix}/solid.mesh`,
    view: `${outputPrefix}/view.glb`,
    thumbnail: `${outputPrefix}/thumbnail.png`,
    proxy: `${outputPrefix}/proxy.mesh`,
  };
  for (const key of Object.values(files)) await put(product, key, Buffer.from(`bytes of ${key}`));
  const surface: SurfaceState = {
    triangles: 12,
    vertices: 8,
    openEdges: 0,
    nonManifoldEdges: 0,
    misorientedEdges: 0,
    duplicateFacets: 0,
    shells: 1,
    closed: true,
    volume: 300 * 400 * 500,
    area: 2 * (300 * 400 + 300 * 500 + 400 * 500),
    size: [300, 400, 500],
    min: [0, 0, 0],
  };
  return {
    report: {
      ...surface,
      format: 'stl-binary',
      fileBytes: 684,
      facetsRead: 12,
      fileUnit: null,
      parts: [],
      asRead: surface,
      mending: [],
      holes: [],
      holesFound: 0,
      choices: noChoices,
      remeshDeviation: null,
      degenerateDropped: 0,
      cavities: 0,
      turnedOutward: false,
      measures: null,
      proxy: { triangles: 12, deviation: null },
      places: [],
      asks: [],
      plannable: true,
      refusal: null,
      notes: [],
      ...changes,
    },
    files,
    viewTriangles: 12,
  };
}

/** What a plan of two pieces brings, with its files in the storage. */
export async function planResult(
  product: TestProduct,
  jobId: string,
): Promise<JobMap['plan.make']['output']> {
  const { outputPrefix, space, seed, millimetresPerUnit } = await inputOf<'plan.make'>(
    product,
    jobId,
  );
  const archive = [];
  for (const [name, length] of [
    ['P01.stl', 200_000],
    ['P02.stl', 90_000],
    ['manifest.json', 400],
    ['cut-list.csv', 80],
  ] as const) {
    const key = `${outputPrefix}/${name}`;
    const bytes = Buffer.from(Array.from({ length }, (_, index) => (index * 31 + length) % 251));
    await put(product, key, bytes);
    archive.push({ name, key, bytes: length });
  }
  await put(product, `${outputPrefix}/view.glb`, Buffer.from('glTF of the plan'));
  const piece = (item: number) => ({
    item,
    name: `P0${item}`,
    triangles: 12,
    volumeMm3: 30_000_000,
    sizeMm: [300, 400, 250] as [number, number, number],
    fits: true,
    space: 0,
    supportMm3: 0,
    file: `P0${item}.stl`,
    placement: [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0],
    centreMm: [150, 200, item === 1 ? 375 : 125] as [number, number, number],
    orientations: [],
    estimate: null,
    notes: [],
    openings: 0,
  });
  return {
    recipe: {
      version: 1,
      seed,
      millimetresPerUnit,
      space,
      otherSpaces: [],
      wishes: usualWishes,
      joints: usualJoints,
      material: usualMaterial,
      orientations: [],
      tree: {
        kind: 'cut',
        plane: { normal: [0, 0, 1], offset: 250 },
        reason: 'Halves the height of 500 mm.',
        above: { kind: 'leaf' },
        below: { kind: 'leaf' },
      },
    },
    pieces: [piece(1), piece(2)],
    seams: [
      {
        between: ['P01', 'P02'],
        areaMm2: 120_000,
        cut: 1,
        visibleMm: 900,
        bendingKpa: 2,
        joint: null,
        glueMl: [0, 0],
      },
    ],
    parts: [],
    assembly: [],
    totals: null,
    bounds: {
      pieces: 2,
      reason: 'Taller than the envelope.',
      gridPieces: 2,
      gap: 'No plan can have fewer.',
    },
    objectives: null,
    offers: [],
    chosenOffer: null,
    proof: [{ check: 'Every piece is closed', measured: '2 of 2', limit: '2', passed: true }],
    timingsMs: { parse: 0, weld: 0, inspect: 0, plan: 5, cut: 5, write: 5 },
    files: { view: `${outputPrefix}/view.glb`, archive },
  };
}

/** A model that is inspected and settled. */
export async function inspectedModel(product: TestProduct, client: ApiClient) {
  const model = await upload(client);
  const jobId = model.revision.job.id;
  const output = await inspectionResult(product, jobId);
  await finishJob(product, jobId, { state: 'done', output });
  await product.product.settler.settleAll();
  return model;
}

export const boxEnvelope = {
  name: 'Medium bed',
  shape: 'rectangular',
  widthMm: 320,
  depthMm: 420,
  heightMm: 250,
  marginMm: 5,
  nozzleMm: 0.4,
  layerHeightMm: 0.2,
} as const;
