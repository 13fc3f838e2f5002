/** The usable build volume, margin already taken off, mm. z is the build direction. */
export type BuildSpace =
  | {
      readonly shape: 'rectangular';
      readonly widthMm: number;
      readonly depthMm: number;
      readonly heightMm: number;
    }
  | { readonly shape: 'round'; readonly diameterMm: number; readonly heightMm: number };
