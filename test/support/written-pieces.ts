import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** Box and volume of a binary STL, straight from its bytes (mm). */
export interface WrittenPiece {
  readonly facets: number;
  readonly size: readonly [number, number, number];
  readonly volumeMm3: number;
}

/** Reads a binary STL as its published layout says: 80 bytes, a count, 50 bytes a facet. */
export function measureBinaryStl(bytes: Uint8Array): WrittenPiece {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const facets = view.getUint32(80, true);
  if (bytes.length !== 84 + 50 * facets) throw new Error('The size does not match the count');
  const min = [Infinity, Infinity, Infinity];
  const max = [-Infinity, -Infinity, -Infinity];
  let volume = 0;
  const corner = new Float64Array(9);
  for (let facet = 0; facet < facets; facet++) {
    for (let k = 0; k < 9; k++) {
      const value = view.getFloat32(84 + 50 * facet + 12 + 4 * k, true);
      corner[k] = value;
      min[k % 3] = Math.min(min[k % 3]!, value);
      max[k % 3] = Math.max(max[k % 3]!, value);
    }
    const [ax, ay, az, bx, by, bz, cx, cy, cz] = corner as unknown as number[];
    volume +=
      (ax! * (by! * cz! - bz! * cy!) +
        ay! * (bz! * cx! - bx! * cz!) +
        az! * (bx! * cy! - by! * cx!)) /
      6;
  }
  return {
    facets,
    size: [max[0]! - min[0]!, max[1]! - min[1]!, max[2]! - min[2]!],
    volumeMm3: volume,
  };
}

export const admeshPath = '/usr/bin/admesh';
export const hasAdmesh = existsSync(admeshPath);

/** What admesh, an independent checker, finds in a file as it was written (its Original column). */
export interface AdmeshFinding {
  readonly facets: number;
  readonly disconnectedFacets: number;
  readonly parts: number;
}

/** @throws Error with what admesh printed when it cannot read the file within a minute */
export function askAdmesh(bytes: Uint8Array): AdmeshFinding {
  const folder = mkdtempSync(join(tmpdir(), 'sw-admesh-'));
  try {
    const file = join(folder, 'piece.stl');
    writeFileSync(file, bytes);
    const run = spawnSync(admeshPath, [file], { encoding: 'utf8', timeout: 60_000 });
    const number = (label: RegExp) => {
      const found = label.exec(run.stdout ?? '');
      if (!found) throw new Error(`admesh said: ${run.stdout ?? ''}${run.stderr ?? ''}`);
      return Number(found[1]);
    };
    return {
      facets: number(/Number of facets\s*:\s*(\d+)/),
      disconnectedFacets: number(/Total disconnected facets\s*:\s*(\d+)/),
      parts: number(/Number of parts\s*:\s*(\d+)/),
    };
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
