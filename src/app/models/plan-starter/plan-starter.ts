import {
  ChangeDetectionStrategy,
  Component,
  computed,
  inject,
  input,
  linkedSignal,
  output,
} from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatError, MatFormField, MatHint, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect, MatSelectTrigger } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { type MaterialResponse } from '../../../../shared/api/materials.contract.js';
import { usualMaterial } from '../../../../shared/jobs/material-profile.js';
import { writeGivenMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { type PlanWishes } from '../../../../shared/jobs/plan-wishes.js';
import { PlanWishesForm } from '../plan-wishes/plan-wishes-form';
import { makeWishesGroup, wishesOf } from '../plan-wishes/wishes-values';
import { isSeed, largestSeed } from '../seed-validator';

/** What the person chose. */
export interface PlanOrder {
  readonly envelopeId: string;
  /** For pieces that the first does not hold. */
  readonly otherEnvelopeIds: string[];
  readonly seed: number;
  readonly wishes: PlanWishes;
  /** Absent while the workshop has none. */
  readonly materialId?: string;
}

/** Orders a plan: for which envelope, by what matters, and for those who want it in more detail. */
@Component({
  selector: 'sw-plan-starter',
  imports: [
    MatButton,
    MatError,
    MatFormField,
    MatHint,
    MatInput,
    MatLabel,
    MatOption,
    MatSelect,
    MatSelectTrigger,
    MatSuffix,
    Notice,
    PlanWishesForm,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './plan-starter.html',
  styleUrl: './plan-starter.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PlanStarter {
  readonly envelopes = input.required<readonly EnvelopeResponse[]>();
  readonly materials = input<readonly MaterialResponse[]>([]);
  /** The envelope to start with, for example that of the latest plan. */
  readonly suggestedId = input<string | null>(null);
  readonly mayEditEnvelopes = input(false);
  readonly isOrdering = input(false);
  readonly problem = input('');
  readonly ordered = output<PlanOrder>();

  protected readonly largestSeed = largestSeed;
  protected readonly envelopeId = linkedSignal(() => {
    const ids = this.envelopes().map((envelope) => envelope.id);
    const suggested = this.suggestedId();
    return suggested && ids.includes(suggested) ? suggested : (ids[0] ?? '');
  });
  protected readonly materialId = linkedSignal(() => {
    const materials = this.materials();
    const usual = materials.find(({ profile }) => profile.name === usualMaterial.name);
    return (usual ?? materials[0])?.id ?? '';
  });
  protected readonly options = computed(() =>
    this.envelopes().map((envelope) => ({
      id: envelope.id,
      name: envelope.name,
      size: sizeInWords(envelope),
    })),
  );
  protected readonly chosen = computed(() =>
    this.options().find((option) => option.id === this.envelopeId()),
  );
  /** Further envelopes, in the order of the list. */
  protected readonly others = computed(() =>
    this.options().filter((option) => option.id !== this.envelopeId()),
  );
  protected readonly wishes = makeWishesGroup();
  protected readonly form = inject(NonNullableFormBuilder).group({
    seed: [1 as number | null, isSeed],
    others: [[] as string[]],
    wishes: this.wishes,
  });

  protected order(): void {
    const envelopeId = this.envelopeId();
    if (this.form.invalid || !envelopeId) {
      this.form.markAllAsTouched();
      return;
    }
    const { seed, others } = this.form.getRawValue();
    const otherEnvelopeIds = others.filter((id) => id !== envelopeId);
    const wishes = wishesOf(this.wishes);
    const materialId = this.materialId();
    this.ordered.emit({
      envelopeId,
      otherEnvelopeIds,
      seed: seed ?? 1,
      wishes,
      ...(materialId && { materialId }),
    });
  }
}

function sizeInWords(envelope: EnvelopeResponse): string {
  const size =
    envelope.shape === 'round'
      ? `⌀ ${writeGivenMm(envelope.diameterMm)}, ${writeGivenMm(envelope.heightMm)} high`
      : writeGivenMm(envelope.widthMm, envelope.depthMm, envelope.heightMm);
  return envelope.marginMm > 0 ? `${size}, margin ${writeGivenMm(envelope.marginMm)}` : size;
}
