import {
  type PlanWishes,
  preferencePresets,
  type Preferences,
} from '../../../../shared/jobs/plan-wishes.js';

/** The sides an object may be looked at from: direction from the object to the viewer. */
export const sides = [
  { id: 'front', name: 'Front', direction: [0, -1, 0] },
  { id: 'back', name: 'Back', direction: [0, 1, 0] },
  { id: 'left', name: 'Left', direction: [-1, 0, 0] },
  { id: 'right', name: 'Right', direction: [1, 0, 0] },
  { id: 'top', name: 'Top', direction: [0, 0, 1] },
  { id: 'underside', name: 'Underside', direction: [0, 0, -1] },
] as const;
export type SideId = (typeof sides)[number]['id'];

/** What each slider weighs, and what it is about. */
export const preferenceWords = [
  { key: 'fewPieces', name: 'Fewer pieces', hint: 'Every piece is printed, glued and sanded.' },
  {
    key: 'littleSupport',
    name: 'Less support',
    hint: 'Support costs material, time and the surface it touches.',
  },
  {
    key: 'hiddenSeams',
    name: 'Seams out of sight',
    hint: 'A seam in view has to be filled and sanded.',
  },
  {
    key: 'sturdySeams',
    name: 'Sturdier seams',
    hint: 'A seam carries what is glued on beyond it.',
  },
] as const satisfies readonly { key: keyof Preferences; name: string; hint: string }[];

/** The preset with these preferences; null for the person's own mixture. */
export function presetOf(preferences: Preferences): string | null {
  const found = preferencePresets.find((preset) =>
    preferenceWords.every(
      ({ key }) => Math.abs(preset.preferences[key] - preferences[key]) < 0.005,
    ),
  );
  return found?.id ?? null;
}

/** What was asked of a plan, for its title block. */
export function wishesInWords(wishes: PlanWishes): string {
  const preset = preferencePresets.find(({ id }) => id === presetOf(wishes.preferences));
  const counted = (count: number, one: string, many: string) =>
    count === 0 ? [] : [count === 1 ? `1 ${one}` : `${count} ${many}`];
  const seen = wishes.showDirections.flatMap((direction) => {
    const side = sides.find((one) => one.direction.every((part, axis) => part === direction[axis]));
    return side ? [side.name.toLowerCase()] : ['a direction of its own'];
  });
  return [
    preset?.name ?? 'Own mixture',
    ...(seen.length > 0 ? [`seen from ${seen.join(', ')}`] : []),
    ...counted(wishes.keepWhole.length, 'zone kept whole', 'zones kept whole'),
    ...counted(wishes.lockedCuts.length, 'own cut', 'own cuts'),
  ].join('; ');
}
