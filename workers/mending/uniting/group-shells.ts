import { boxesTouch, placeOf, type Shell } from './list-shells.js';

/** Pairs of shells whose facets are looked at one against the other at most; bounds the work. */
const mostPairs = 20_000;

export interface ShellGroups {
  /** Shells that have to be united with each other. A shell that only crosses itself is one alone. */
  readonly groups: readonly (readonly Shell[])[];
  /** Numbers of those that cross themselves. */
  readonly selfCrossing: ReadonlySet<number>;
  /** Numbers of pairs of shells that cross: `lower,higher`. */
  readonly pairs: ReadonlySet<string>;
}

/**
 * Groups shells that cross or lie partly in each other, with those that lie inside of one of them, and
 * with those around them as long as these make a difference: between a solid and its hollow a group
 * stands for itself. All other shells are in no group.
 * @param labels shell of each triangle
 * @param report called between steps, for signs of life
 */
export function groupShells(
  shells: readonly Shell[],
  labels: Int32Array,
  crossingTriangles: Uint32Array,
  report: () => void = () => {},
): ShellGroups {
  const link = shells.map((_, i) => i);
  const isLinked = new Uint8Array(shells.length);
  const selfCrossing = new Set<number>();
  const pairs = new Set<string>();
  const join = (a: number, b: number): void => {
    isLinked[a] = 1;
    isLinked[b] = 1;
    const [x, y] = [rootOf(link, a), rootOf(link, b)];
    link[Math.max(x, y)] = Math.min(x, y);
  };
  for (let i = 0; i < crossingTriangles.length; i += 2) {
    const [a, b] = [labels[crossingTriangles[i]], labels[crossingTriangles[i + 1]]];
    join(a, b);
    if (a === b) selfCrossing.add(a);
    else pairs.add(a < b ? `${a},${b}` : `${b},${a}`);
  }
  joinPartlyInside(shells, link, join, report);
  takeInNested(shells, link, isLinked, join, report);
  const groups = new Map<number, Shell[]>();
  for (const shell of shells) {
    if (isLinked[shell.number] === 0) continue;
    const root = rootOf(link, shell.number);
    const group = groups.get(root);
    if (group) group.push(shell);
    else groups.set(root, [shell]);
  }
  return { groups: [...groups.values()], selfCrossing, pairs };
}

/** Shells whose faces lie on each other need not cross anywhere and still share space. */
function joinPartlyInside(
  shells: readonly Shell[],
  link: number[],
  join: (a: number, b: number) => void,
  report: () => void,
): void {
  let looked = 0;
  for (const [i, shell] of shells.entries()) {
    report();
    for (let j = 0; j < i && looked < mostPairs; j++) {
      const other = shells[j];
      if (!boxesTouch(shell, other) || rootOf(link, i) === rootOf(link, j)) continue;
      looked++;
      if (placeOf(shell, other) === 'partly' || placeOf(other, shell) === 'partly') join(i, j);
    }
  }
}

function takeInNested(
  shells: readonly Shell[],
  link: number[],
  isLinked: Uint8Array,
  join: (a: number, b: number) => void,
  report: () => void,
): void {
  for (let isGrowing = true; isGrowing;) {
    isGrowing = false;
    for (const member of shells) {
      if (isLinked[member.number] === 0) continue;
      report();
      const near = shells.filter(
        (shell) => isLinked[shell.number] === 0 && boxesTouch(shell, member),
      );
      const inner = near.filter((shell) => placeOf(shell, member) === 'inside');
      const around = near.filter((shell) => placeOf(member, shell) === 'inside');
      const depth = around.reduce((sum, shell) => sum + Math.sign(shell.volume), 0);
      for (const shell of depth === 0 ? inner : [...inner, ...around]) {
        join(member.number, shell.number);
        isGrowing = true;
      }
    }
  }
}

function rootOf(link: number[], at: number): number {
  while (link[at] !== at) {
    link[at] = link[link[at]];
    at = link[at];
  }
  return at;
}
