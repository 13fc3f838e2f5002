import { FormArray, FormControl, FormGroup, Validators } from '@angular/forms';
import { type PlanWishes, usualWishes, type Zone } from '../../../../shared/jobs/plan-wishes.js';
import { type SideId, sides } from '../../ui/wishes/wishes-words';

const farthestMm = 1e6;
const coordinate = (value = 0) =>
  new FormControl<number | null>(value, [
    Validators.required,
    Validators.min(-farthestMm),
    Validators.max(farthestMm),
  ]);
const length = (value: number) =>
  new FormControl<number | null>(value, [
    Validators.required,
    Validators.min(0.001),
    Validators.max(farthestMm),
  ]);
const share = (value: number) => new FormControl(value, { nonNullable: true });

/** A zone by numbers: a box about its middle, or a ball. */
export function makeZoneGroup(number: number) {
  return new FormGroup({
    shape: new FormControl<'box' | 'sphere'>('box', { nonNullable: true }),
    name: new FormControl(`Zone ${number}`, {
      nonNullable: true,
      validators: [Validators.required, Validators.maxLength(80)],
    }),
    x: coordinate(),
    y: coordinate(),
    z: coordinate(),
    width: length(20),
    depth: length(20),
    height: length(20),
    radius: length(10),
  });
}

/** A plane across an axis, mm from the model's origin. */
export function makeCutGroup() {
  return new FormGroup({
    across: new FormControl<'x' | 'y' | 'z'>('z', { nonNullable: true }),
    at: coordinate(),
  });
}

export type ZoneGroup = ReturnType<typeof makeZoneGroup>;
export type CutGroup = ReturnType<typeof makeCutGroup>;

/** All that can be asked of a plan, as a form; begins with the usual. */
export function makeWishesGroup() {
  const { preferences, overhangDegrees, leastPieceMm } = usualWishes;
  return new FormGroup({
    preferences: new FormGroup({
      fewPieces: share(preferences.fewPieces),
      littleSupport: share(preferences.littleSupport),
      hiddenSeams: share(preferences.hiddenSeams),
      sturdySeams: share(preferences.sturdySeams),
    }),
    seenFrom: new FormControl<SideId[]>([], { nonNullable: true }),
    zones: new FormArray<ZoneGroup>([]),
    cuts: new FormArray<CutGroup>([]),
    overhangDegrees: new FormControl<number | null>(overhangDegrees, [
      Validators.required,
      Validators.min(10),
      Validators.max(85),
    ]),
    leastPieceMm: new FormControl<number | null>(leastPieceMm, [
      Validators.required,
      Validators.min(0),
      Validators.max(200),
    ]),
  });
}
export type WishesGroup = ReturnType<typeof makeWishesGroup>;

/** What the form says, as the server takes it. The form is valid. */
export function wishesOf(group: WishesGroup): PlanWishes {
  const value = group.getRawValue();
  return {
    ...usualWishes,
    preferences: value.preferences,
    showDirections: sides
      .filter(({ id }) => value.seenFrom.includes(id))
      .map(({ direction }) => [...direction]),
    keepWhole: group.controls.zones.controls.map(zoneOf),
    lockedCuts: value.cuts.map(({ across, at }) => ({
      normal: [across === 'x' ? 1 : 0, across === 'y' ? 1 : 0, across === 'z' ? 1 : 0],
      offset: at ?? 0,
    })),
    overhangDegrees: value.overhangDegrees ?? usualWishes.overhangDegrees,
    leastPieceMm: value.leastPieceMm ?? usualWishes.leastPieceMm,
  };
}

function zoneOf(group: ZoneGroup): Zone {
  const { shape, name, ...numbers } = group.getRawValue();
  const [x, y, z] = [numbers.x ?? 0, numbers.y ?? 0, numbers.z ?? 0];
  if (shape === 'sphere')
    return { shape, name: name.trim(), centre: [x, y, z], radiusMm: numbers.radius ?? 0 };
  const half = [numbers.width, numbers.depth, numbers.height].map((side) => (side ?? 0) / 2);
  const [w, d, h] = half as [number, number, number];
  return { shape, name: name.trim(), min: [x - w, y - d, z - h], max: [x + w, y + d, z + h] };
}
