import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { type PlanResponse } from '../../../../shared/api/plans.contract.js';
import { type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { usualJoints } from '../../../../shared/jobs/joint-plan.js';
import { usualMaterial } from '../../../../shared/jobs/material-profile.js';
import { usualWishes } from '../../../../shared/jobs/plan-wishes.js';
import { type Piece } from '../../../../shared/jobs/plan-make.js';

const id = (letter: string) => letter.repeat(20);

export const sampleEnvelope: EnvelopeResponse = {
  id: id('e'),
  name: 'Bench cube',
  updatedAt: '2031-03-04T12:00:00.000Z',
  shape: 'rectangular',
  widthMm: 220,
  depthMm: 220,
  heightMm: 250,
  marginMm: 0,
  nozzleMm: 0.4,
  layerHeightMm: 0.2,
};

export function sampleJob(changes: Partial<JobResponse> = {}): JobResponse {
  return {
    id: id('j'),
    kind: 'plan.make',
    state: 'done',
    stage: '',
    fraction: 1,
    error: null,
    ...changes,
  };
}

export function samplePiece(item: number, changes: Partial<Piece> = {}): Piece {
  const name = `P${String(item).padStart(2, '0')}`;
  return {
    item,
    name,
    triangles: 1_200 * item,
    volumeMm3: 1e6 * item,
    sizeMm: [100 + item, 200, 50],
    fits: true,
    space: 0,
    supportMm3: 2_000 * item,
    file: `pieces/${name}.stl`,
    placement: [1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1, 0],
    centreMm: [0, 0, 100 * item],
    orientations: [],
    estimate: null,
    notes: [],
    openings: 0,
    ...changes,
  };
}

/** A plan of three pieces stacked on each other, all of it in order. */
export function samplePlan(changes: Partial<PlanResponse> = {}): PlanResponse {
  const leaf = { kind: 'leaf' } as const;
  return {
    id: id('p'),
    modelId: id('m'),
    modelName: 'Harbour bell',
    revisionNumber: 2,
    number: 3,
    seed: 1,
    envelope: sampleEnvelope,
    otherEnvelopes: [],
    wishes: usualWishes,
    fromPlan: null,
    objectives: null,
    createdAt: '2031-03-04T12:00:00.000Z',
    createdBy: 'Designer',
    job: sampleJob(),
    pieceCount: 3,
    allPassed: true,
    release: null,
    result: {
      recipe: {
        version: 1,
        seed: 1,
        millimetresPerUnit: 1,
        space: { shape: 'rectangular', widthMm: 220, depthMm: 220, heightMm: 250 },
        otherSpaces: [],
        wishes: usualWishes,
        joints: usualJoints,
        material: usualMaterial,
        orientations: [],
        tree: {
          kind: 'cut',
          plane: { normal: [0, 0, 1], offset: 150 },
          reason: 'The first reason.',
          above: {
            kind: 'cut',
            plane: { normal: [0, 0.6, 0.8], offset: 250 },
            reason: 'The second reason.',
            above: leaf,
            below: leaf,
          },
          below: leaf,
        },
      },
      pieces: [samplePiece(1), samplePiece(2), samplePiece(3)],
      seams: [
        {
          between: ['P01', 'P02'],
          areaMm2: 12_000,
          cut: 1,
          visibleMm: 340,
          bendingKpa: 12,
          joint: null,
          glueMl: [0, 0],
        },
        {
          between: ['P02', 'P03'],
          areaMm2: 0.05,
          cut: 2,
          visibleMm: 0,
          bendingKpa: 0,
          joint: null,
          glueMl: [0, 0],
        },
      ],
      bounds: {
        pieces: 2,
        reason: 'The solid needs two envelopes.',
        gridPieces: 4,
        gap: 'One piece above the bound.',
      },
      objectives: null,
      offers: [],
      parts: [],
      assembly: [],
      totals: null,
      chosenOffer: null,
      proof: [
        { check: 'Every file is closed', measured: '0 open edges', limit: '0', passed: true },
        { check: 'Every piece fits', measured: '1.2 mm left', limit: '0 mm', passed: true },
      ],
      timingsMs: { parse: 1, weld: 1, inspect: 1, plan: 1, cut: 1, write: 1 },
      archiveBytes: 12_400_000,
    },
    ...changes,
  };
}

/** A plan that is not there yet. */
export function unfinishedPlan(job: Partial<JobResponse>): PlanResponse {
  return samplePlan({ job: sampleJob(job), result: null, pieceCount: null, allPassed: null });
}
