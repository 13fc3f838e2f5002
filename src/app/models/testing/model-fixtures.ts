import { type ModelResponse } from '../../../../shared/api/models.contract.js';
import { type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { type MeshReport } from '../../../../shared/jobs/model-inspect.js';

/** An identifier that begins with readable letters. */
export function idOf(start: string): string {
  return start.padEnd(20, '0');
}

export function makeJob(change: Partial<JobResponse> = {}): JobResponse {
  return {
    id: idOf('job'),
    kind: 'model.inspect',
    state: 'done',
    stage: '',
    fraction: 1,
    error: null,
    ...change,
  };
}

/** The report of a closed box of 10 × 20 × 40 file units. */
export function makeReport(change: Partial<MeshReport> = {}): MeshReport {
  return {
    format: 'stl-binary',
    fileBytes: 684,
    facetsRead: 12,
    triangles: 12,
    vertices: 8,
    degenerateDropped: 0,
    duplicateFacets: 0,
    openEdges: 0,
    nonManifoldEdges: 0,
    misorientedEdges: 0,
    shells: 1,
    cavities: 0,
    closed: true,
    turnedOutward: false,
    volume: 8_000,
    area: 2_800,
    size: [10, 20, 40],
    min: [0, 0, 0],
    plannable: true,
    refusal: null,
    notes: [],
    ...change,
  };
}

/** An inspected model, ready to be planned. */
export function makeModel(
  change: Partial<Omit<ModelResponse, 'revision'>> = {},
  revision: Partial<ModelResponse['revision']> = {},
): ModelResponse {
  return {
    id: idOf('model'),
    name: 'Heron',
    createdAt: '2031-03-04T13:05:00.000Z',
    createdBy: 'Ada Larch',
    planCount: 0,
    ...change,
    revision: {
      id: idOf('revision'),
      number: 1,
      fileName: 'heron.stl',
      fileBytes: 684,
      report: makeReport(),
      scaleConfirmed: true,
      scale: { unit: 'mm', factor: 1, target: null },
      scaleReason: '',
      sizeMm: [10, 20, 40],
      volumeMm3: 8_000,
      areaMm2: 2_800,
      hasThumbnail: false,
      hasView: false,
      viewTriangles: 12,
      job: makeJob(),
      ...revision,
    },
  };
}
