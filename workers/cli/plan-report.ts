import { type MendingStep } from '../../shared/jobs/model-inspect.js';
import { type ProofRow, type Seam } from '../../shared/jobs/plan-make.js';

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
  /** What was done to the file before it was planned, step by step. */
  mending: Pick<MendingStep, 'kind' | 'count' | 'sentence'>[];
}
