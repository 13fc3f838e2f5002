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
import { MatError, MatFormField, MatHint, MatLabel } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect, MatSelectTrigger } from '@angular/material/select';
import { RouterLink } from '@angular/router';
import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { writeGivenMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { isSeed, largestSeed } from '../seed-validator';

/** What the person chose. */
export interface PlanOrder {
  readonly envelopeId: string;
  readonly seed: number;
}

/** Orders a plan: for which envelope and, for those who want it, from which seed. */
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
    Notice,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './plan-starter.html',
  styleUrl: './plan-starter.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PlanStarter {
  readonly envelopes = input.required<readonly EnvelopeResponse[]>();
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
  protected readonly form = inject(NonNullableFormBuilder).group({
    seed: [1 as number | null, isSeed],
  });

  protected order(): void {
    const envelopeId = this.envelopeId();
    if (this.form.invalid || !envelopeId) {
      this.form.markAllAsTouched();
      return;
    }
    this.ordered.emit({ envelopeId, seed: this.form.getRawValue().seed ?? 1 });
  }
}

function sizeInWords(envelope: EnvelopeResponse): string {
  const size =
    envelope.shape === 'round'
      ? `⌀ ${writeGivenMm(envelope.diameterMm)}, ${writeGivenMm(envelope.heightMm)} high`
      : writeGivenMm(envelope.widthMm, envelope.depthMm, envelope.heightMm);
  return envelope.marginMm > 0 ? `${size}, margin ${writeGivenMm(envelope.marginMm)}` : size;
}
