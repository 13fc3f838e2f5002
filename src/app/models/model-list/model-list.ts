import { LiveAnnouncer } from '@angular/cdk/a11y';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  viewChild,
  type ElementRef,
  input,
  linkedSignal,
  untracked,
} from '@angular/core';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatFormField, MatLabel, MatPrefix } from '@angular/material/form-field';
import { MatIcon } from '@angular/material/icon';
import { MatInput } from '@angular/material/input';
import { MatProgressBar } from '@angular/material/progress-bar';
import { Router, RouterLink } from '@angular/router';
import { type ModelResponse } from '../../../../shared/api/models.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { FailureNotes } from '../../core/errors/failure-notes';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { FileDrop } from '../../ui/file-drop/file-drop';
import { writeMoment, writeSizeMm } from '../../ui/format/quantities';
import { Notice } from '../../ui/notice/notice';
import { modelState } from '../model-state';
import { ModelsStore } from '../models-store';
import { removalHindrance, removalQuestion } from '../removal-question';
import { modelEndings } from '../upload-checks';
import { UploadList } from '../upload-list/upload-list';
import { UploadQueue } from '../upload-queue';

/** Every model of the workshop, with the place where new ones come in. */
@Component({
  selector: 'sw-model-list',
  imports: [
    EmptyState,
    FileDrop,
    MatButton,
    MatFormField,
    MatIcon,
    MatIconButton,
    MatInput,
    MatLabel,
    MatPrefix,
    MatProgressBar,
    Notice,
    RouterLink,
    UploadList,
  ],
  providers: [ModelsStore],
  templateUrl: './model-list.html',
  styleUrl: './model-list.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ModelList {
  private readonly store = inject(ModelsStore);
  private readonly queue = inject(UploadQueue);
  private readonly sessions = inject(SessionStore);
  private readonly router = inject(Router);
  private readonly confirmations = inject(Confirmations);
  private readonly notes = inject(FailureNotes);
  private readonly announcer = inject(LiveAnnouncer);

  /** What is searched for (query). */
  readonly q = input<string>();

  protected readonly query = linkedSignal(() => this.q() ?? '');
  private readonly heading = viewChild.required<ElementRef<HTMLElement>>('heading');

  protected readonly endings = modelEndings;
  protected readonly problem = this.store.problem;
  protected readonly isEmpty = this.store.isEmpty;
  protected readonly uploads = this.queue.uploads;
  protected readonly mayWrite = computed(() => this.sessions.can('model.write'));
  protected readonly rows = computed(
    () =>
      this.store.found()?.map((model) => ({
        model,
        state: modelState(model),
        size: model.revision.sizeMm ? writeSizeMm(model.revision.sizeMm) : '–',
        added: writeMoment(model.createdAt),
        thumbnail: model.revision.hasThumbnail
          ? `/api/models/${model.id}/thumbnail?revision=${model.revision.id}`
          : null,
      })) ?? null,
  );

  constructor() {
    void this.store.load();
    effect(() => {
      const query = this.query();
      this.store.search(query);
      if (query === untracked(() => this.q() ?? '')) return;
      void this.router.navigate([], { queryParams: { q: query || null }, replaceUrl: true });
    });
  }

  protected async load(): Promise<void> {
    await this.store.load();
  }

  protected upload(files: readonly File[]): void {
    this.queue.add(files);
  }

  protected cancelUpload(id: number): void {
    this.queue.cancel(id);
  }

  protected tryUploadAgain(id: number): void {
    this.queue.tryAgain(id);
  }

  protected dismissUpload(id: number): void {
    this.queue.dismiss(id);
  }

  protected dismissFinishedUploads(): void {
    this.queue.dismissFinished();
  }

  protected async remove(model: ModelResponse): Promise<void> {
    const hindrance = removalHindrance(model);
    if (hindrance) {
      this.notes.say(hindrance);
      return;
    }
    if (!(await this.confirmations.ask(removalQuestion(model)))) return;
    try {
      await this.store.remove(model.id);
      // The button that had the focus is gone with its row.
      this.heading().nativeElement.focus();
      await this.announcer.announce(`${model.name} is removed.`);
    } catch (failure) {
      // Expected: a plan is being made from it, it was removed elsewhere, the role changed.
      this.notes.show(failure);
      await this.store.load();
    }
  }
}
