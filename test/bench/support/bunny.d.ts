/** A scan of a rabbit, y up, its base open. */
declare module 'bunny' {
  export const positions: [number, number, number][];
  export const cells: [number, number, number][];
}
