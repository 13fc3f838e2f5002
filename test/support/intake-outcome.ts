import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { roundAndWeld } from '../../shared/geometry/mesh/rounded.js';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';
import { identityMotion } from '../../shared/geometry/vectors/rigid-motion.js';
import { noChoices, type MendingChoices } from '../../shared/jobs/mending-choices.js';
import { writeStl } from '../../workers/export/stl-writer.js';
import { type Inspection, inspectFile } from '../../workers/inspecting/inspect-file.js';
import { JobRefusal } from '../../workers/runtime/job-refusal.js';
import { loadSolids, type Solids } from '../../workers/solids/solid-kernel.js';
import { askAdmesh } from './admesh.js';

/** How a file ended when every question about it was answered with yes. */
export interface IntakeOutcome {
  readonly end: 'solid' | 'refused';
  /** What was decided on the way, in order. */
  readonly decisions: readonly string[];
  readonly reason: string | null;
  readonly inspection: Inspection | null;
  readonly choices: MendingChoices;
}

/**
 * Inspects a file and answers as a person would who wants the solid: holes are filled whatever their
 * size, a surface that cannot be mended is rebuilt, and what mending made is taken.
 */
export function inspectSayingYes(
  bytes: Uint8Array,
  fileName: string,
  solids: Solids,
  remeshCells = 200,
): IntakeOutcome {
  const decisions: string[] = [];
  let choices = noChoices;
  for (;;) {
    let inspection: Inspection;
    try {
      inspection = inspectFile({ bytes, fileName, choices }, { solids });
    } catch (error) {
      if (!(error instanceof JobRefusal)) throw error;
      const reason = error.message;
      return { end: 'refused', decisions, reason, inspection: null, choices };
    }
    const { report, solid } = inspection;
    const [ask] = report.asks;
    if (report.refusal !== null)
      return { end: 'refused', decisions, reason: report.refusal, inspection, choices };
    if (solid && (ask === undefined || ask.kind === 'accept')) {
      if (ask) decisions.push('taken');
      return { end: 'solid', decisions, reason: ask?.sentence ?? null, inspection, choices };
    }
    if (ask?.kind === 'fill-holes' && choices.fillHolesUpTo === null) {
      choices = { ...choices, fillHolesUpTo: ask.longest };
      decisions.push('holes filled');
    } else if (choices.remeshCells === null) {
      choices = { ...choices, remeshCells };
      decisions.push('rebuilt');
    } else {
      const reason = ask?.sentence ?? 'Neither a solid nor a question.';
      return { end: 'refused', decisions, reason, inspection, choices };
    }
  }
}

/** What others say of a solid, as written and as handed over. */
export interface OutsideOpinion {
  /** manifold-3d's status, 'NoError' when it takes the mesh. */
  readonly manifold: string;
  /** Its volume, in the mesh's unit. */
  readonly manifoldVolume: number;
  /** Facets without a neighbour that admesh finds in the written STL; null when it is not there. */
  readonly admeshOpen: number | null;
  /** Edges of the written STL, read again, that are not used once each way. */
  readonly writtenFaults: number;
}

/** Asks manifold-3d about the mesh and admesh about its STL, both about the middle of its box. */
export async function judgeSolid(
  solid: TriangleMesh,
  middle: readonly [number, number, number],
  isAdmeshThere: boolean,
): Promise<OutsideOpinion> {
  const { withSolids } = await loadSolids();
  const positions = Float64Array.from(solid.positions, (value, i) => value - middle[i % 3]!);
  const { manifold, manifoldVolume } = withSolids(({ Manifold, Mesh, keep }) => {
    const vertProperties = Float32Array.from(positions);
    try {
      const made = keep(
        new Manifold(new Mesh({ numProp: 3, vertProperties, triVerts: solid.indices })),
      );
      return { manifold: String(made.status()), manifoldVolume: made.volume() };
    } catch (error) {
      return { manifold: (error as Error).message, manifoldVolume: NaN };
    }
  });
  const written = roundAndWeld({ positions, indices: solid.indices }, identityMotion);
  const { openEdges, nonManifoldEdges, misorientedEdges } = written.report;
  return {
    manifold,
    manifoldVolume,
    admeshOpen: isAdmeshThere ? admeshOf(writeStl(written, 'intake')) : null,
    writtenFaults: openEdges + nonManifoldEdges + misorientedEdges,
  };
}

function admeshOf(stl: Uint8Array): number {
  const folder = mkdtempSync(join(tmpdir(), 'sw-intake-'));
  try {
    const path = join(folder, 'solid.stl');
    writeFileSync(path, stl);
    return askAdmesh(path).disconnectedFacets;
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
