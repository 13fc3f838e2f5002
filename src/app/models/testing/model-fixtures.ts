import { type ModelResponse } from '../../../../shared/api/models.contract.js';
import { type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { noChoices } from '../../../../shared/jobs/mending-choices.js';
import { type MeshReport, type SurfaceState } from '../../../../shared/jobs/model-inspect.js';

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

/** The surface of a closed box of 10 × 20 × 40 file units. */
export function makeSurface(change: Partial<SurfaceState> = {}): SurfaceState {
  return {
    triangles: 12,
    vertices: 8,
    openEdges: 0,
    nonManifoldEdges: 0,
    misorientedEdges: 0,
    duplicateFacets: 0,
    shells: 1,
    closed: true,
    volume: 8_000,
    area: 2_800,
    size: [10, 20, 40],
    min: [0, 0, 0],
    ...change,
  };
}

/** The report of a closed box of 10 × 20 × 40 file units. */
export function makeReport(change: Partial<MeshReport> = {}): MeshReport {
  return {
    ...makeSurface(),
    format: 'stl-binary',
    fileBytes: 684,
    facetsRead: 12,
    fileUnit: null,
    parts: [],
    asRead: makeSurface(),
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
      createdAt: '2031-03-04T13:05:00.000Z',
      report: makeReport(),
      choices: noChoices,
      isAccepted: false,
      isPlannable: (revision.report === undefined || revision.report?.plannable) ?? false,
      scaleConfirmed: true,
      scale: { unit: 'mm', factor: 1, target: null },
      scaleReason: '',
      millimetresPerUnit: 1,
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
