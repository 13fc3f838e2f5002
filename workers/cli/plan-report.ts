import { type MendingStep } from '../../shared/jobs/model-inspect.js';
import { type Objectives, type ProofRow, type Seam } from '../../shared/jobs/plan-make.js';

/** What `--json` prints. The field names are a contract with scripts: they stay. */
export interface PlanReport {
  model: {
    triangles: number;
    volumeMm3: number;
    sizeMm: readonly [number, number, number];
    closed: boolean;
  };
  pieces: {
    name: string;
    triangles: number;
    volumeMm3: number;
    /** As laid on the bed. */
    sizeMm: readonly [number, number, number];
    fits: boolean;
    /** In this orientation; a planning figure. */
    supportMm3: number;
    /** Which of the envelopes it goes to, from 0. */
    envelope: number;
    file: string;
  }[];
  seams: Pick<Seam, 'between' | 'areaMm2' | 'visibleMm' | 'bendingKpa'>[];
  bounds: { pieces: number; reason: string; gap: string; gridPieces: number };
  proof: ProofRow[];
  timingsMs: {
    parse: number;
    weld: number;
    inspect: number;
    plan: number;
    cut: number;
    write: number;
  };
  peakMemoryMb: number;
  /** All plans of which none is better than another in everything, the one made among them. */
  plans: {
    bestAt: string[];
    isMade: boolean;
    objectives: Objectives;
    bounds: { pieces: number; gap: string };
    cuts: {
      normal: readonly [number, number, number];
      offset: number;
      locked: boolean;
      reason: string;
    }[];
  }[];
  /** What was done to the file before it was planned, step by step. */
  mending: Pick<MendingStep, 'kind' | 'count' | 'sentence'>[];
}
