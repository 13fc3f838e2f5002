import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import { MatIcon } from '@angular/material/icon';
import { RouterLink } from '@angular/router';
import { type PlanSummary } from '../../../../shared/api/plans.contract.js';
import { writeMoment } from '../../ui/format/quantities';

/** The plans of one model, newest first. */
@Component({
  selector: 'sw-model-plans',
  imports: [MatIcon, RouterLink],
  templateUrl: './model-plans.html',
  styleUrl: './model-plans.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ModelPlans {
  readonly plans = input.required<readonly PlanSummary[]>();

  protected readonly rows = computed(() =>
    [...this.plans()]
      .sort((a, b) => b.number - a.number)
      .map((plan) => ({ plan, ...standing(plan), made: writeMoment(plan.createdAt) })),
  );
}

function standing(plan: PlanSummary): { words: string; icon: string; kind: string } {
  switch (plan.job.state) {
    case 'queued':
      return { words: 'Waiting', icon: 'hourglass_empty', kind: 'open' };
    case 'running': {
      const percent = Math.floor(plan.job.fraction * 100);
      return { words: `Being made, ${percent} %`, icon: 'hourglass_empty', kind: 'open' };
    }
    case 'cancelled':
      return { words: 'Cancelled', icon: 'block', kind: 'open' };
    case 'failed':
      return { words: 'Not made', icon: 'error', kind: 'failed' };
    case 'done':
      return plan.allPassed
        ? { words: 'All checks passed', icon: 'check_circle', kind: 'passed' }
        : { words: 'A check failed', icon: 'error', kind: 'failed' };
  }
}
