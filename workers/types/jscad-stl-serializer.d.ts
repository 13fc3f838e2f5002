/** The package ships no types. Only what the STL writer uses, from its source of version 2.1.23. */
declare module '@jscad/stl-serializer/CSGToStlb.js' {
  interface SerializerPolygon {
    vertices: number[][];
    /** Unit normal and offset; computed from the first three vertices when absent. */
    plane?: number[];
  }
  interface SerializerGeometry {
    polygons: SerializerPolygon[];
    /** Column-major 4×4; the identity leaves the coordinates as they are. */
    transforms: number[];
  }
  /** Returns the header (80 bytes), the count (4 bytes) and the facets (50 bytes each). */
  export function serializeBinary(
    objects: SerializerGeometry[],
    options: { statusCallback?: (status: { progress: number }) => void },
  ): [ArrayBuffer, ArrayBuffer, ArrayBuffer];
}
