import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { toObservable, toSignal } from '@angular/core/rxjs-interop';
import { ReactiveFormsModule } from '@angular/forms';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatButtonToggle, MatButtonToggleGroup } from '@angular/material/button-toggle';
import { MatError, MatFormField, MatHint, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatIcon } from '@angular/material/icon';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import { MatSlider, MatSliderThumb } from '@angular/material/slider';
import { LiveAnnouncer } from '@angular/cdk/a11y';
import { startWith, switchMap } from 'rxjs';
import { preferencePresets } from '../../../../shared/jobs/plan-wishes.js';
import { preferenceWords, presetOf, sides } from '../../ui/wishes/wishes-words';
import { makeCutGroup, makeZoneGroup, type WishesGroup } from './wishes-values';

const mostZones = 50;
const mostCuts = 60;

/** What a person asks of a plan: what matters, where it is looked at, what stays whole, own cuts. */
@Component({
  selector: 'sw-plan-wishes-form',
  imports: [
    MatButton,
    MatButtonToggle,
    MatButtonToggleGroup,
    MatError,
    MatFormField,
    MatHint,
    MatIcon,
    MatIconButton,
    MatInput,
    MatLabel,
    MatOption,
    MatSelect,
    MatSlider,
    MatSliderThumb,
    MatSuffix,
    ReactiveFormsModule,
  ],
  templateUrl: './plan-wishes-form.html',
  styleUrl: './plan-wishes-form.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PlanWishesForm {
  private readonly announcer = inject(LiveAnnouncer);

  readonly group = input.required<WishesGroup>();

  protected readonly presets = preferencePresets;
  protected readonly words = preferenceWords;
  protected readonly sides = sides;
  private readonly value = toSignal(
    toObservable(this.group).pipe(switchMap((group) => group.valueChanges.pipe(startWith(null)))),
  );
  /** Empty when the sliders stand like none of the presets. */
  protected readonly preset = computed(() => {
    this.value();
    return presetOf(this.group().controls.preferences.getRawValue()) ?? '';
  });
  protected readonly zones = computed(() => {
    this.value();
    return [...this.group().controls.zones.controls];
  });
  protected readonly cuts = computed(() => {
    this.value();
    return [...this.group().controls.cuts.controls];
  });
  protected readonly mayAddZone = computed(() => this.zones().length < mostZones);
  protected readonly mayAddCut = computed(() => this.cuts().length < mostCuts);
  protected readonly inPercent = (value: number): string => `${Math.round(100 * value)} %`;

  protected choosePreset(id: string): void {
    const preset = this.presets.find((one) => one.id === id);
    if (preset) this.group().controls.preferences.setValue(preset.preferences);
  }

  protected addZone(): void {
    const { zones } = this.group().controls;
    zones.push(makeZoneGroup(zones.length + 1));
    void this.announcer.announce(`Zone ${zones.length} added.`);
  }

  protected removeZone(index: number): void {
    this.group().controls.zones.removeAt(index);
    void this.announcer.announce(`Zone ${index + 1} removed.`);
  }

  protected addCut(): void {
    const { cuts } = this.group().controls;
    cuts.push(makeCutGroup());
    void this.announcer.announce(`Cut ${cuts.length} added.`);
  }

  protected removeCut(index: number): void {
    this.group().controls.cuts.removeAt(index);
    void this.announcer.announce(`Cut ${index + 1} removed.`);
  }
}
