import { strToU8, zipSync } from 'fflate';
import type { TriangleMesh } from '../../shared/geometry/mesh/triangle-mesh.js';

/** The `object` element of a mesh. */
export function meshObject(id: number, mesh: TriangleMesh, attributes = ''): string {
  const vertices: string[] = [];
  for (let i = 0; i < mesh.positions.length; i += 3)
    vertices.push(
      `<vertex x="${mesh.positions[i]}" y="${mesh.positions[i + 1]}" z="${mesh.positions[i + 2]}"/>`,
    );
  const triangles: string[] = [];
  for (let i = 0; i < mesh.indices.length; i += 3)
    triangles.push(
      `<triangle v1="${mesh.indices[i]}" v2="${mesh.indices[i + 1]}" v3="${mesh.indices[i + 2]}"/>`,
    );
  return `<object id="${id}" type="model" ${attributes}><mesh><vertices>${vertices.join('')}</vertices><triangles>${triangles.join('')}</triangles></mesh></object>`;
}

/** A model part; `unit` null leaves the attribute out. */
export function modelXml(
  resources: string,
  build: string,
  { unit = 'millimeter', attributes = '' }: { unit?: string | null; attributes?: string } = {},
): string {
  const stated = unit === null ? '' : `unit="${unit}"`;
  return `<?xml version="1.0" encoding="UTF-8"?>\n<model ${stated} xml:lang="en-US" xmlns="http://schemas.microsoft.com/3dmanufacturing/core/2015/02" ${attributes}><resources>${resources}</resources><build>${build}</build></model>`;
}

const contentTypes =
  '<?xml version="1.0" encoding="UTF-8"?><Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Default Extension="model" ContentType="application/vnd.ms-package.3dmanufacturing-3dmodel+xml"/></Types>';

export function relationshipsXml(target = '/3D/3dmodel.model'): string {
  return `<?xml version="1.0" encoding="UTF-8"?><Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Target="${target}" Id="rel0" Type="http://schemas.microsoft.com/3dmanufacturing/2013/01/3dmodel"/></Relationships>`;
}

/** A 3MF package (3MF Core 1.4.0) of one model part and more parts by path. */
export function threeMfFile(model: string, more: Record<string, string> = {}): Uint8Array {
  const parts: Record<string, string> = {
    '[Content_Types].xml': contentTypes,
    '_rels/.rels': relationshipsXml(),
    '3D/3dmodel.model': model,
    ...more,
  };
  return zipSync(
    Object.fromEntries(Object.entries(parts).map(([path, text]) => [path, strToU8(text)])),
  );
}

/** A 3MF file of one mesh. */
export function simpleThreeMf(mesh: TriangleMesh, unit: string | null = 'millimeter'): Uint8Array {
  return threeMfFile(modelXml(meshObject(1, mesh), '<item objectid="1"/>', { unit }));
}
