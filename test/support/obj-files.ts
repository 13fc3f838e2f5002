import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** An OBJ text of a mesh: full digits, faces counted from 1. */
export function objText(mesh: TriangleMesh, firstVertex = 1): string {
  const lines: string[] = [];
  for (let i = 0; i < mesh.positions.length; i += 3)
    lines.push(`v ${mesh.positions[i]} ${mesh.positions[i + 1]} ${mesh.positions[i + 2]}`);
  for (let i = 0; i < mesh.indices.length; i += 3)
    lines.push(`f ${[0, 1, 2].map((k) => mesh.indices[i + k]! + firstVertex).join(' ')}`);
  return `${lines.join('\n')}\n`;
}

export function objFile(mesh: TriangleMesh): Uint8Array {
  return new TextEncoder().encode(objText(mesh));
}
