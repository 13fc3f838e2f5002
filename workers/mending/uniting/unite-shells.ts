import { surfacesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { roundAndWeld } from '../../../shared/geometry/mesh/rounded.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import type { MendingStep } from '../../../shared/jobs/model-inspect.js';
import { countOf } from '../../intake/refusal-words.js';
import { findCrossings } from '../../measuring/find-crossings.js';
import { buildBvh } from '../../measuring/triangle-bvh.js';
import { type JobContext, portionOf, silentContext } from '../../runtime/job-context.js';
import type { Solids } from '../../solids/solid-kernel.js';
import { groupShells, type ShellGroups } from './group-shells.js';
import { listShells, placeOf, type Shell } from './list-shells.js';
import { joinMeshes } from './mesh-parts.js';
import { partContacts } from './part-contacts.js';
import { arrangeSurface } from '../arranging/arrange-surface.js';
import { isSameInside } from './same-inside.js';
import { uniteMeshes, type UnionPart } from './unite-meshes.js';

export type UnitedShells =
  { readonly mesh: TriangleMesh; readonly steps: MendingStep[] } | { readonly refusal: string };

const cannotUnite =
  'The surface crosses itself in a way that cannot be united exactly. Have the surface rebuilt on a grid.';

/**
 * Makes one solid of shells that overlap: inside is where they wind more than zero times around a
 * point. Shells that share no space with others come through untouched, vertex for vertex. Hollows go
 * with the smallest shell around them. A shell that crosses itself is divided along its crossings, and
 * what bounds the solid is kept. The result is closed, also in single precision, and is checked against
 * the winding of the input; when that fails it is refused in a sentence that names the way out.
 * @param mesh closed, each shell facing outward or, as a hollow, inward; it is not changed
 * @param tools.crossingTriangles pairs of triangles that cross; found here when they are not given
 */
export function uniteShells(
  mesh: TriangleMesh,
  tools: {
    readonly solids: Solids;
    readonly crossingTriangles?: Uint32Array;
    readonly context?: JobContext;
  },
): UnitedShells {
  const { solids, context = silentContext } = tools;
  if (mesh.indices.length === 0) return { mesh, steps: [] };
  const crossingTriangles =
    tools.crossingTriangles ?? findCrossings(mesh, buildBvh(mesh), { context }).triangles;
  context.progress('Uniting', 0);
  const shells = listShells(mesh);
  const found = groupShells(shells, surfacesOf(mesh).labels, crossingTriangles, () =>
    context.progress('Uniting', 0),
  );
  const { groups } = found;
  if (groups.length === 0) return { mesh, steps: [] };
  const results: TriangleMesh[] = [];
  for (const [number, group] of groups.entries()) {
    const part = portionOf(context, number / groups.length, (number + 1) / groups.length);
    const solid = uniteGroup(group, found, { solids, context: part });
    if (!solid) return { refusal: cannotUnite };
    results.push(solid);
  }
  const inGroup = new Set(groups.flat());
  const untouched = shells.filter((shell) => !inGroup.has(shell));
  const whole = makeWritable(
    untouched.map((shell) => shell.mesh),
    results,
  );
  return whole ? { mesh: whole, steps: [stepOf(groups)] } : { refusal: cannotUnite };
}

/**
 * The shells side by side, closed also in single precision, as far as those that were not touched are.
 * Null when that takes more than drawing apart what touches.
 */
function makeWritable(
  untouched: readonly TriangleMesh[],
  united: readonly TriangleMesh[],
): TriangleMesh | null {
  const whole = joinMeshes([...untouched, ...united]);
  if (!edgeReport(whole).closed) return null;
  const before = untouched.length > 0 ? faultsWhenRounded(joinMeshes(untouched)) : 0;
  if (faultsWhenRounded(whole) <= before) return whole;
  const first = untouched.reduce((sum, mesh) => sum + mesh.positions.length / 3, 0);
  const apart = partContacts(whole, first);
  if (faultsWhenRounded(apart) > before) return null;
  return findCrossings(apart, buildBvh(apart)).pairs > 0 ? null : apart;
}

function stepOf(groups: ShellGroups['groups']): MendingStep {
  const count = groups.flat().length;
  const lone = groups.filter((group) => group.length === 1).length;
  const several = count - lone;
  const solids = groups.length - lone;
  const sentences: string[] = [];
  if (several > 0)
    sentences.push(
      `${countOf(several, 'shell')} that ran into each other were united into ${countOf(solids, 'solid')}.`,
    );
  if (lone > 0)
    sentences.push(
      lone === 1
        ? 'A shell that crossed itself was made one solid.'
        : `${countOf(lone, 'shell')} that crossed themselves were each made one solid.`,
    );
  return { kind: 'unite', count, sentence: sentences.join(' ') };
}

/** Edges that are not closed once the coordinates about the middle are single precision. */
function faultsWhenRounded(mesh: TriangleMesh): number {
  const { min, size } = boundingBox(mesh.positions);
  const [x, y, z] = min.map((value, axis) => -value - size[axis] / 2);
  const { report } = roundAndWeld(mesh, [1, 0, 0, x, 0, 1, 0, y, 0, 0, 1, z]);
  return report.openEdges + report.nonManifoldEdges + report.misorientedEdges;
}

/** Null when it cannot be done, or the result does not hold the same points. */
function uniteGroup(
  group: readonly Shell[],
  found: ShellGroups,
  { solids, context }: { solids: Solids; context: JobContext },
): TriangleMesh | null {
  const together = joinMeshes(group.map((shell) => shell.mesh));
  if (group.some((shell) => found.selfCrossing.has(shell.number))) {
    const { triangles, complete } = findCrossings(together, buildBvh(together), { context });
    const arranged = complete ? arrangeSurface(together, triangles) : null;
    return arranged && isSameInside(together, arranged) ? arranged : null;
  }
  const parts: UnionPart[] = [];
  for (const [outer, hollows] of hollowsByOuter(group)) {
    const crossing = hollows.filter((hollow) => doCross(outer, hollow, found));
    const nested = hollows.filter((hollow) => !crossing.includes(hollow));
    const mesh = joinMeshes([outer, ...nested].map((shell) => shell.mesh));
    const without = crossing.map((hollow) => turned(hollow.mesh));
    parts.push({ mesh, without });
  }
  if (parts.length === 0) return null;
  context.progress('Uniting', 0.8);
  const united = uniteMeshes(parts, solids);
  if (!united) return null;
  context.progress('Uniting', 0.9);
  return isSameInside(together, united) ? united : null;
}

/** Hollows of the group by the smallest shell around them; those around which no shell lies are left out. */
function hollowsByOuter(group: readonly Shell[]): Map<Shell, Shell[]> {
  const outers = group.filter((shell) => shell.volume > 0).sort((a, b) => a.volume - b.volume);
  const hollowsOf = new Map<Shell, Shell[]>(outers.map((outer) => [outer, []]));
  for (const hollow of group) {
    if (hollow.volume > 0) continue;
    const around = outers.find((outer) => placeOf(hollow, outer) !== 'outside');
    if (around) hollowsOf.get(around)!.push(hollow);
  }
  return hollowsOf;
}

function doCross(one: Shell, other: Shell, { pairs }: ShellGroups): boolean {
  const [a, b] = [one.number, other.number];
  return pairs.has(a < b ? `${a},${b}` : `${b},${a}`);
}

function turned({ positions, indices }: TriangleMesh): TriangleMesh {
  const other = indices.slice();
  for (let i = 0; i < other.length; i += 3) {
    other[i + 1] = indices[i + 2];
    other[i + 2] = indices[i + 1];
  }
  return { positions, indices: other };
}
