import { spawnSync } from 'node:child_process';

/** What the outside checker says about a file as it is, before any repair of its own. */
export interface AdmeshFindings {
  disconnectedFacets: number;
  parts: number;
}

export function hasAdmesh(): boolean {
  return spawnSync('admesh', ['--version'], { timeout: 10_000 }).error === undefined;
}

/** Debian's admesh on one STL file, its Original column. Throws when it says nothing (it can hang). */
export function askAdmesh(path: string): AdmeshFindings {
  const { stdout } = spawnSync('admesh', [path], { timeout: 30_000, encoding: 'utf8' });
  const number = (label: string) => {
    const found = new RegExp(`${label}\\s*:\\s*(\\d+)`).exec(stdout ?? '');
    if (!found) throw new Error(`admesh gave no "${label}" for ${path}.`);
    return Number(found[1]);
  };
  return {
    disconnectedFacets: number('Total disconnected facets'),
    parts: number('Number of parts'),
  };
}
