import { type MendingStep } from '../../shared/jobs/model-inspect.js';
import {
  type Objectives,
  type PlanOutput,
  type ProofRow,
  type Seam,
} from '../../shared/jobs/plan-make.js';

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
    file: string;
  }[];
  seams: Pick<Seam, 'between' | 'areaMm2'>[];
  bounds: { pieces: number };
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
    bounds: PlanOutput['bounds'];
    cuts: {
      normal: readonly [number, number, number];
      offset: number;
      locked: boolean;
      reason: string;
    }[];
    /** Of the plan that was made: support as laid, and which of the envelopes, from 0. */
    pieces?: { name: string; supportMm3: number; envelope: number }[];
    seams?: Pick<Seam, 'between' | 'visibleMm' | 'bendingKpa'>[];
  }[];
  /** What was done to the file before it was planned, step by step. */
  mending: Pick<MendingStep, 'kind' | 'count' | 'sentence'>[];
}
