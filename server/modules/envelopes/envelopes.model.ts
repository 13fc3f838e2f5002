interface Common {
  readonly name: string;
  readonly heightMm: number;
  /** Stays free on every side of the bed. */
  readonly marginMm: number;
  readonly nozzleMm: number;
  readonly layerHeightMm: number;
}

/** What a shop lead saves: a rectangular or round build volume. */
export type EnvelopeData =
  | (Common & {
      readonly shape: 'rectangular';
      readonly widthMm: number;
      readonly depthMm: number;
    })
  | (Common & { readonly shape: 'round'; readonly diameterMm: number });

export type Envelope = EnvelopeData & { readonly id: string; readonly updatedAt: Date };
