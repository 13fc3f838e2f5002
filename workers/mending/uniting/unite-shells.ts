import { boundingBox } from '../../../shared/geometry/mesh/measure.js';
import { surfacesOf } from '../../../shared/geometry/mesh/edge-mates.js';
import { roundAndWeld } from '../../../shared/geometry/mesh/rounded.js';
import { listByShell, shellVolumes } from '../../../shared/geometry/mesh/shells.js';
import { edgeReport } from '../../../shared/geometry/mesh/topology.js';
import type { TriangleMesh } from '../../../shared/geometry/mesh/triangle-mesh.js';
import { identityMotion } from '../../../shared/geometry/vectors/rigid-motion.js';
import type { MendingStep } from '../../../shared/jobs/model-inspect.js';
import { countOf } from '../../intake/refusal-words.js';
import { type JobContext, silentContext } from '../../runtime/job-context.js';
import type { Solids } from '../../solids/solid-kernel.js';
import { joinMeshes, pickTriangles } from './mesh-parts.js';
import { partSelfCrossing } from './part-self-crossing.js';
import { uniteMeshes } from './unite-meshes.js';

export type UnitedShells =
  { readonly mesh: TriangleMesh; readonly steps: MendingStep[] } | { readonly refusal: string };

/** A shell with what belongs to it. */
interface Shell {
  readonly number: number;
  readonly volume: number;
  readonly min: readonly number[];
  readonly max: readonly number[];
  readonly mesh: TriangleMesh;
}

/**
 * Makes one solid of shells that overlap: inside is where the winding number is positive. Shells that
 * touch no other come through untouched, vertex for vertex. Cavities go with the smallest shell
 * around them. A shell that crosses itself is first cut into parts that do not, and those are united
 * again. Refused when that does not work, in a sentence that names the way out.
 * @param mesh closed, each shell facing outward or, as a cavity, inward
 * @param tools.crossingTriangles pairs of triangles that cross, as `findCrossings` gives them
 */
export function uniteShells(
  mesh: TriangleMesh,
  tools: {
    readonly solids: Solids;
    readonly crossingTriangles?: Uint32Array;
    readonly context?: JobContext;
  },
): UnitedShells {
  const { solids, crossingTriangles = new Uint32Array(0), context = silentContext } = tools;
  const { labels } = surfacesOf(mesh);
  const shells = listShells(mesh);
  const selfCrossing = new Set<number>();
  const link = new Int32Array(shells.length).map((_, i) => i);
  for (let i = 0; i < crossingTriangles.length; i += 2) {
    const [a, b] = [labels[crossingTriangles[i]], labels[crossingTriangles[i + 1]]];
    if (a === b) selfCrossing.add(a);
    else unite(link, a, b);
  }
  const groups = groupTouching(shells, link, selfCrossing);
  const untouched = shells.filter((shell) => !groups.some((group) => group.includes(shell)));
  const results: TriangleMesh[] = [];
  let united = 0;
  for (const [number, group] of groups.entries()) {
    context.progress('Uniting', number / groups.length);
    const solid = uniteGroup(group, selfCrossing, { solids, context });
    if ('refusal' in solid) return solid;
    results.push(solid.mesh);
    united += group.length;
  }
  if (groups.length === 0) return { mesh, steps: [] };
  const whole = joinMeshes([...untouched.map((shell) => shell.mesh), ...results]);
  if (!edgeReport(whole).closed || !roundAndWeld(whole, identityMotion).report.closed)
    return { refusal: cannotUnite };
  const sentence =
    united === 1
      ? 'A surface that crosses itself was united into one solid.'
      : `${countOf(united, 'shell')} that ran into each other were united into ${countOf(groups.length, 'solid')}.`;
  return { mesh: whole, steps: [{ kind: 'unite', count: united, sentence }] };
}

const cannotUnite =
  'The surface crosses itself in a way that cannot be united exactly. Have the surface rebuilt on a grid.';

function listShells(mesh: TriangleMesh): Shell[] {
  const surfaces = surfacesOf(mesh);
  const volumes = shellVolumes(mesh, surfaces);
  const { triangles, start } = listByShell(surfaces);
  return Array.from(volumes, (volume, number) => {
    const part = pickTriangles(mesh, triangles.subarray(start[number], start[number + 1]));
    const { min, max } = boundingBox(part.positions);
    return { number, volume, min, max, mesh: part };
  });
}

/** Shells that cross, each group with all other shells whose boxes touch one of it. */
function groupTouching(
  shells: readonly Shell[],
  link: Int32Array,
  selfCrossing: ReadonlySet<number>,
): Shell[][] {
  const isLinked = new Set<number>(selfCrossing);
  shells.forEach((shell) => {
    const root = findRoot(link, shell.number);
    if (root !== shell.number) isLinked.add(root).add(shell.number);
  });
  // What lies near a crossing may be swallowed by the union, so it has to take part.
  for (let isGrowing = true; isGrowing;) {
    isGrowing = false;
    for (const shell of shells) {
      if (isLinked.has(shell.number)) continue;
      const other = shells.find((one) => isLinked.has(one.number) && boxesTouch(one, shell));
      if (!other) continue;
      unite(link, other.number, shell.number);
      isLinked.add(shell.number);
      isGrowing = true;
    }
  }
  const groups = new Map<number, Shell[]>();
  for (const shell of shells) {
    if (!isLinked.has(shell.number)) continue;
    const root = findRoot(link, shell.number);
    const group = groups.get(root);
    if (group) group.push(shell);
    else groups.set(root, [shell]);
  }
  return [...groups.values()];
}

function uniteGroup(
  group: readonly Shell[],
  selfCrossing: ReadonlySet<number>,
  { solids, context }: { solids: Solids; context: JobContext },
): { mesh: TriangleMesh } | { refusal: string } {
  const outers = group.filter((shell) => shell.volume > 0);
  const cavitiesOf = new Map<Shell, Shell[]>(outers.map((outer) => [outer, []]));
  for (const cavity of group.filter((shell) => shell.volume <= 0)) {
    const around = outers
      .filter((outer) => contains(outer, cavity))
      .sort((a, b) => a.volume - b.volume)[0];
    if (around) cavitiesOf.get(around)!.push(cavity);
  }
  const parts: TriangleMesh[] = [];
  for (const [outer, cavities] of cavitiesOf) {
    const solid = joinMeshes([outer, ...cavities].map((shell) => shell.mesh));
    if (![outer, ...cavities].some((shell) => selfCrossing.has(shell.number))) {
      parts.push(solid);
      continue;
    }
    const separated = partSelfCrossing(solid, solids, context);
    if (!separated) return { refusal: cannotUnite };
    parts.push(...separated);
  }
  const mesh = uniteMeshes(parts, solids);
  return mesh ? { mesh } : { refusal: cannotUnite };
}

function boxesTouch(a: Shell, b: Shell): boolean {
  return [0, 1, 2].every((axis) => a.min[axis] <= b.max[axis] && b.min[axis] <= a.max[axis]);
}

function contains(outer: Shell, inner: Shell): boolean {
  return [0, 1, 2].every(
    (axis) => outer.min[axis] <= inner.min[axis] && inner.max[axis] <= outer.max[axis],
  );
}

function unite(link: Int32Array, a: number, b: number): void {
  const [x, y] = [findRoot(link, a), findRoot(link, b)];
  link[Math.max(x, y)] = Math.min(x, y);
}

function findRoot(link: Int32Array, at: number): number {
  while (link[at] !== at) {
    link[at] = link[link[at]];
    at = link[at];
  }
  return at;
}
