import loadManifold, { type CrossSection, type Manifold, type ManifoldToplevel } from 'manifold-3d';
import type { PolygonTriangulator } from '../../shared/geometry/cutting/cut-mesh.js';
import { createTriangulator } from './triangulate-loops.js';

/** Anything of the WASM heap that must be given back. */
interface Handle {
  delete(): void;
}

/** Owns handles until its block ends. */
export interface SolidScope {
  readonly Manifold: ManifoldToplevel['Manifold'];
  readonly CrossSection: ManifoldToplevel['CrossSection'];
  readonly Mesh: ManifoldToplevel['Mesh'];
  /** Takes a handle into the scope and returns it: `const hull = keep(solid.hull())`. */
  readonly keep: <H extends Handle>(handle: H) => H;
}

export interface Solids {
  readonly triangulate: PolygonTriangulator;
  /** Runs a block; every handle it kept is freed when it returns or throws. Return plain data only. */
  readonly withSolids: <R>(block: (scope: SolidScope) => R) => R;
}

export type { CrossSection, Manifold };

let loading: Promise<Solids> | undefined;

/** The solid kernel of this thread, loaded once. The only importer of manifold-3d. */
export function loadSolids(): Promise<Solids> {
  loading ??= load();
  return loading;
}

async function load(): Promise<Solids> {
  const module = await loadManifold();
  module.setup();
  return {
    triangulate: createTriangulator(module),
    withSolids: (block) => {
      const kept: Handle[] = [];
      const keep = <H extends Handle>(handle: H): H => {
        kept.push(handle);
        return handle;
      };
      try {
        const { Manifold, CrossSection, Mesh } = module;
        return block({ Manifold, CrossSection, Mesh, keep });
      } finally {
        for (let i = kept.length - 1; i >= 0; i--) kept[i].delete();
      }
    },
  };
}
