import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  output,
} from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { NonNullableFormBuilder, ReactiveFormsModule } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatError, MatFormField, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatRadioButton, MatRadioGroup } from '@angular/material/radio';
import { MatOption, MatSelect } from '@angular/material/select';
import { map } from 'rxjs';
import { type ModelScale } from '../../../../shared/api/model-scale.js';
import { Notice } from '../../ui/notice/notice';
import { writeSizeInFileUnits, writeSizeMm } from '../../ui/format/quantities';
import {
  above,
  scaledSizeMm,
  scaleFrom,
  scaleValuesOf,
  type ScaleValues,
  type Size,
} from '../scale-values';

/** How large the object will be: the file's unit and, if wanted, one length it is stretched to. */
@Component({
  selector: 'sw-scale-form',
  imports: [
    MatButton,
    MatCheckbox,
    MatError,
    MatFormField,
    MatInput,
    MatLabel,
    MatOption,
    MatRadioButton,
    MatRadioGroup,
    MatSelect,
    MatSuffix,
    Notice,
    ReactiveFormsModule,
  ],
  templateUrl: './scale-form.html',
  styleUrl: './scale-form.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ScaleForm {
  readonly fileSize = input.required<Size>();
  readonly scale = input.required<ModelScale>();
  readonly isConfirmed = input.required<boolean>();
  /** Why this scale was guessed. */
  readonly reason = input('');
  readonly isReadOnly = input(false);
  readonly isSaving = input(false);
  readonly scaleChosen = output<ModelScale>();

  protected readonly axes = [
    { value: 'z', name: 'tall (z)' },
    { value: 'x', name: 'along x' },
    { value: 'y', name: 'along y' },
    { value: 'longest', name: 'along its longest side' },
  ] as const;
  protected readonly form = inject(NonNullableFormBuilder).group({
    unit: ['mm' as ModelScale['unit']],
    factor: [1 as number | null, above(0, 1e6)],
    hasTarget: [false],
    lengthMm: [null as number | null],
    axis: ['z' as 'x' | 'y' | 'z' | 'longest'],
  });
  private readonly values = toSignal(
    this.form.valueChanges.pipe(map(() => this.form.getRawValue() satisfies ScaleValues)),
    { initialValue: this.form.getRawValue() satisfies ScaleValues },
  );

  protected readonly chosen = computed(() => scaleFrom(this.values()));
  protected readonly fileSizeWords = computed(() => writeSizeInFileUnits(this.fileSize()));
  protected readonly resultWords = computed(() => {
    const scale = this.chosen();
    return scale ? writeSizeMm(scaledSizeMm(scale, this.fileSize())) : '';
  });
  protected readonly hasTarget = computed(() => this.values().hasTarget);
  protected readonly isOther = computed(() => this.values().unit === 'other');
  protected readonly isChanged = computed(() => {
    const scale = this.chosen();
    return (
      scale !== null &&
      JSON.stringify(scale) !== JSON.stringify(scaleFrom(scaleValuesOf(this.scale())))
    );
  });

  constructor() {
    effect(() => {
      this.form.setValue(scaleValuesOf(this.scale()));
      if (this.isReadOnly()) this.form.disable({ emitEvent: false });
    });
  }

  protected save(): void {
    const scale = this.chosen();
    if (scale) this.scaleChosen.emit(scale);
    else this.form.markAllAsTouched();
  }
}
