import { type Material, type Object3D, type BufferGeometry } from 'three';

/** Anything that draws has both, whatever its class. */
interface Drawn {
  geometry?: BufferGeometry;
  material?: Material | Material[];
}

/**
 * Frees the GPU memory of an object and everything under it, and takes it out of its parent.
 * Geometries and materials that are shared may be met twice; freeing twice is harmless.
 */
export function disposeTree(root: Object3D): void {
  root.traverse((object) => {
    const { geometry, material } = object as Object3D & Drawn;
    geometry?.dispose();
    for (const one of Array.isArray(material) ? material : material ? [material] : [])
      one.dispose();
  });
  root.removeFromParent();
}
