import { ChangeDetectionStrategy, Component, computed, input, output } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatProgressBar } from '@angular/material/progress-bar';
import { type JobResponse } from '../../../../shared/api/jobs.contract.js';
import { Notice } from '../notice/notice';

/** Long work, honestly: the step's name, how far it is, what went wrong, and a way to stop it. */
@Component({
  selector: 'sw-job-progress',
  imports: [MatButton, MatProgressBar, Notice],
  templateUrl: './job-progress.html',
  styleUrl: './job-progress.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class JobProgress {
  readonly job = input.required<JobResponse>();
  /** What is being done, for example "Inspecting harbour-bell.stl". */
  readonly title = input.required<string>();
  readonly canCancel = input(false);
  /** Set between asking for the cancel and its coming true. */
  readonly isCancelling = input(false);
  readonly cancelAsked = output<void>();
  /** For work that has something to show before its end. */
  readonly canTakeBest = input(false);
  /** Set once the best so far was asked for. */
  readonly isFinishing = input(false);
  readonly bestAsked = output<void>();

  protected readonly isOpen = computed(() => ['queued', 'running'].includes(this.job().state));
  protected readonly percent = computed(() => Math.floor(this.job().fraction * 100));
  protected readonly step = computed(() => {
    const job = this.job();
    if (this.isCancelling()) return 'Stopping';
    if (job.state === 'queued') return 'Waiting for a free worker';
    return job.stage || 'Starting';
  });
}
