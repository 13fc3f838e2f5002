import { materialProfile, type MaterialProfile } from '../../../shared/jobs/material-profile.js';

/** One number of a profile as a field of the form. */
export interface MaterialField {
  /** Where it stands in the profile, parted by dots; numbers are places of a range. */
  readonly path: string;
  readonly name: string;
  readonly unit: string;
  readonly hint: string;
}

export interface FieldGroup {
  readonly name: string;
  readonly lead: string;
  readonly fields: readonly MaterialField[];
}

const field = (path: string, name: string, unit: string, hint = ''): MaterialField => ({
  path,
  name,
  unit,
  hint,
});

/** Every number of a profile, in the order a shop lead thinks of them. */
export const fieldGroups: readonly FieldGroup[] = [
  {
    name: 'Filament',
    lead: 'For mass, length and cost.',
    fields: [
      field('densityGPerCm3', 'Density', 'g/cm³'),
      field('pricePerKg', 'Price of a kilogram', '', 'In your own currency'),
      field('filamentMm', 'Diameter of the strand', 'mm'),
      field('shrinkagePercent', 'Linear shrinkage', '%', 'How much smaller parts get as they cool'),
    ],
  },
  {
    name: 'What it can print',
    lead: 'Decides where support is counted and how pieces lie.',
    fields: [
      field('overhangDegrees', 'Steepest overhang', '°', 'From the vertical'),
      field('bridgeMm', 'Longest bridge', 'mm', 'Between two walls, without support'),
      field('supportFillPercent', 'Filling of support', '%'),
    ],
  },
  {
    name: 'Clearances',
    lead: 'Diametral: width of the hole minus width of the pin, never per side.',
    fields: [
      field('clearances.pressMm', 'Press fit', 'mm', 'Negative holds by force'),
      field('clearances.locatingMm', 'Locating', 'mm', 'The pins of seams'),
      field('clearances.slidingMm', 'Sliding', 'mm', 'Lips behind a wall'),
      field('clearances.looseMm', 'Loose', 'mm', 'Pins that only keep order'),
    ],
  },
  {
    name: 'Print settings',
    lead: 'For the estimates.',
    fields: [
      field('lineWidthMm', 'Line width', 'mm'),
      field('layerHeightMm', 'Layer height', 'mm'),
      field('walls', 'Lines in a wall', ''),
      field('infillPercent', 'Infill', '%'),
      field('flowMm3PerS.0', 'Flow, low', 'mm³/s'),
      field('flowMm3PerS.1', 'Flow, high', 'mm³/s'),
      field('flowShare.0', 'Share of the flow, low', '', 'Over a whole print'),
      field('flowShare.1', 'Share of the flow, high', ''),
    ],
  },
  {
    name: 'Glue',
    lead: 'For volumes, mixes and the order of gluing.',
    fields: [
      field('glue.filmMm', 'Film', 'mm', '0.1 to 0.2 holds best'),
      field('glue.potLifeMinutes', 'Pot life', 'min'),
      field('glue.holdMinutes', 'Hold', 'min', 'Until it can be let go'),
      field('glue.densityGPerMl', 'Density', 'g/ml'),
      field('glue.allowance.0', 'Mixed for the film, low', '×'),
      field('glue.allowance.1', 'Mixed for the film, high', '×'),
      field('glue.coatedCm2PerMinute', 'Coated in a minute', 'cm²'),
    ],
  },
];

export const allFields: readonly MaterialField[] = fieldGroups.flatMap(({ fields }) => fields);

/** The number at a path of a profile. */
export function readField(profile: MaterialProfile, path: string): number {
  return path
    .split('.')
    .reduce<unknown>((at, key) => (at as Record<string, unknown>)[key], profile) as number;
}

/**
 * A profile with other numbers. Throws what the schema says is wrong with them.
 * @param values by path; null stands for an empty field
 */
export function withFields(
  profile: MaterialProfile,
  values: Readonly<Record<string, number | null>>,
): MaterialProfile {
  return materialProfile.parse(written(profile, values));
}

/** What is wrong, by path; empty when the numbers make a profile. */
export function fieldProblems(
  profile: MaterialProfile,
  values: Readonly<Record<string, number | null>>,
): Record<string, string> {
  const parsed = materialProfile.safeParse(written(profile, values));
  if (parsed.success) return {};
  return Object.fromEntries(
    parsed.error.issues.map(({ path, message }) => [path.join('.'), message]),
  );
}

function written(
  profile: MaterialProfile,
  values: Readonly<Record<string, number | null>>,
): Record<string, unknown> {
  const copy = structuredClone(profile) as unknown as Record<string, unknown>;
  for (const [path, value] of Object.entries(values)) {
    const keys = path.split('.');
    const last = keys.pop()!;
    const holder = keys.reduce<Record<string, unknown>>(
      (at, key) => at[key] as Record<string, unknown>,
      copy,
    );
    holder[last] = value ?? Number.NaN;
  }
  return copy;
}
