import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  untracked,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatProgressBar } from '@angular/material/progress-bar';
import { RouterLink } from '@angular/router';
import { type PlanSummary } from '../../../../shared/api/plans.contract.js';
import { writeMoment } from '../../ui/format/quantities';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { Notice } from '../../ui/notice/notice';
import { PlanListStore } from './plan-list-store';

/** Every plan of the workshop, or of one model with `?modelId=`. */
@Component({
  selector: 'sw-plan-list',
  imports: [EmptyState, MatButton, MatProgressBar, Notice, RouterLink],
  templateUrl: './plan-list.html',
  styleUrl: './plan-list.scss',
  providers: [PlanListStore],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class PlanList {
  protected readonly store = inject(PlanListStore);

  /** From the address; all models when it is not there. */
  readonly modelId = input<string>();

  protected readonly rows = computed(() =>
    this.store.plans().map((plan) => ({
      id: plan.id,
      name: `${plan.modelName}, plan ${plan.number}`,
      envelope: plan.envelope.name,
      made: `${writeMoment(plan.createdAt)}, ${plan.createdBy}`,
      state: stateInWords(plan),
    })),
  );

  constructor() {
    effect(() => {
      const modelId = this.modelId();
      untracked(() => void this.store.load(modelId));
    });
  }
}

function stateInWords(plan: PlanSummary): string {
  switch (plan.job.state) {
    case 'queued':
      return 'waiting';
    case 'running':
      return `being made, ${Math.floor(plan.job.fraction * 100)} %`;
    case 'failed':
      return 'failed';
    case 'cancelled':
      return 'cancelled';
    case 'done': {
      const pieces = plan.pieceCount === 1 ? '1 piece' : `${plan.pieceCount ?? 0} pieces`;
      return plan.allPassed ? `${pieces}, proof passed` : `${pieces}, proof failed`;
    }
  }
}
