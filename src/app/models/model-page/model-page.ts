import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
} from '@angular/core';
import { NgTemplateOutlet } from '@angular/common';
import { MatButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';
import { MatProgressBar } from '@angular/material/progress-bar';
import { Router, RouterLink } from '@angular/router';
import { type ModelScale } from '../../../../shared/api/model-scale.js';
import { SessionStore } from '../../core/auth/session-store';
import { FailureNotes } from '../../core/errors/failure-notes';
import { PageTitle } from '../../core/layout/page-title';
import { type FlatArea, type HoleReport } from '../../../../shared/jobs/model-inspect.js';
import { type MendingChoices } from '../../../../shared/jobs/mending-choices.js';
import { Confirmations } from '../../ui/confirm-dialog/confirmations';
import { EmptyState } from '../../ui/empty-state/empty-state';
import { writeArea, writeMoment, writeSizeMm, writeVolume } from '../../ui/format/quantities';
import { JobProgress } from '../../ui/job-progress/job-progress';
import { Notice } from '../../ui/notice/notice';
import { ModelView } from '../../viewer/model-view/model-view';
import { MendingDesk } from '../mending-desk/mending-desk';
import { MeshNote } from '../mesh-note/mesh-note';
import { ModelPlans } from '../model-plans/model-plans';
import { modelState } from '../model-state';
import { ModelStore } from '../model-store';
import { PlanDesk } from '../plan-desk';
import { PlaceList } from '../place-list/place-list';
import { PlanStarter, type PlanOrder } from '../plan-starter/plan-starter';
import { removalHindrance, removalQuestion } from '../removal-question';
import { RenameField } from '../rename-field/rename-field';
import { RevisionDesk } from '../revision-desk';
import { RevisionList } from '../revision-list/revision-list';
import { ScaleForm } from '../scale-form/scale-form';
import { SolidFacts } from '../solid-facts/solid-facts';
import { modelEndings } from '../upload-checks';

/** One model: what its file holds, how large it is to be, and the plans made from it. */
@Component({
  selector: 'sw-model-page',
  imports: [
    EmptyState,
    JobProgress,
    MatButton,
    MatIcon,
    MatProgressBar,
    MendingDesk,
    MeshNote,
    ModelPlans,
    ModelView,
    NgTemplateOutlet,
    Notice,
    PlaceList,
    PlanStarter,
    RenameField,
    RevisionList,
    RouterLink,
    ScaleForm,
    SolidFacts,
  ],
  providers: [ModelStore, PlanDesk, RevisionDesk],
  templateUrl: './model-page.html',
  styleUrl: './model-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ModelPage {
  private readonly store = inject(ModelStore);
  private readonly desk = inject(PlanDesk);
  private readonly revisionDesk = inject(RevisionDesk);
  private readonly sessions = inject(SessionStore);
  private readonly router = inject(Router);
  private readonly confirmations = inject(Confirmations);
  private readonly notes = inject(FailureNotes);
  private readonly title = inject(PageTitle);

  readonly modelId = input.required<string>();

  protected readonly model = this.store.model;
  protected readonly problem = this.store.problem;
  protected readonly isInspecting = this.store.isInspecting;
  protected readonly isCancelling = this.store.isCancelling;
  protected readonly plans = this.desk.plans;
  protected readonly envelopes = this.desk.envelopes;
  protected readonly materials = this.desk.materials;
  protected readonly suggestedEnvelopeId = this.desk.suggestedEnvelopeId;
  protected readonly planProblem = this.desk.problem;
  protected readonly isOrdering = this.desk.isOrdering;
  protected readonly mayWrite = computed(() => this.sessions.can('model.write'));
  protected readonly mayPlan = computed(() => this.sessions.can('plan.write'));
  protected readonly mayCancel = computed(() => this.sessions.can('job.cancel'));
  protected readonly mayEditEnvelopes = computed(() => this.sessions.can('envelope.write'));
  protected readonly isSavingScale = signal(false);
  protected readonly endings = modelEndings;
  protected readonly revisions = this.revisionDesk.revisions;
  protected readonly sentShare = this.revisionDesk.fraction;
  protected readonly revisionProblem = this.revisionDesk.problem;
  /** The place that the picture flies to, in the unit of the file. */
  protected readonly place = signal<{
    readonly at: readonly [number, number, number];
    readonly reach: number;
  } | null>(null);
  /** Another inspection or revision brings another picture. */
  protected readonly pictureVersion = computed(() => {
    const model = this.model();
    return model && !this.isInspecting() ? `${model.revision.id} ${model.revision.job.id}` : '';
  });
  protected readonly state = computed(() => {
    const model = this.model();
    return model && modelState(model);
  });
  protected readonly facts = computed(() => {
    const model = this.model();
    if (!model) return [];
    const { sizeMm, volumeMm3, areaMm2, number, fileName, report } = model.revision;
    // Only a closed surface holds a volume.
    const volume = report?.closed && volumeMm3 !== null ? writeVolume(volumeMm3) : '';
    return [
      { name: 'File', value: fileName },
      { name: 'Revision', value: `${number}, ${writeMoment(model.revision.createdAt)}` },
      { name: 'Size', value: sizeMm ? writeSizeMm(sizeMm) : '' },
      { name: 'Volume', value: volume },
      { name: 'Surface', value: areaMm2 === null ? '' : writeArea(areaMm2) },
    ].filter((fact) => fact.value !== '');
  });

  constructor() {
    effect(() => {
      const id = this.modelId();
      untracked(() => this.store.open(id));
      untracked(() => void this.desk.load(id));
      untracked(() => this.place.set(null));
    });
    effect(() => {
      // With every inspection that ends there is more to compare.
      if (this.pictureVersion() === '') return;
      untracked(() => void this.revisionDesk.load(this.modelId()));
    });
    effect(() => {
      const model = this.model();
      if (model) this.title.set(model.name);
    });
  }

  protected async rename(name: string): Promise<void> {
    await this.tell(() => this.store.change({ name }));
  }

  protected async saveScale(scale: ModelScale): Promise<void> {
    this.isSavingScale.set(true);
    await this.tell(() => this.store.change({ scale }));
    this.isSavingScale.set(false);
  }

  protected async mend(choices: MendingChoices): Promise<void> {
    this.place.set(null);
    await this.tell(() => this.store.mend(choices));
  }

  protected async accept(): Promise<void> {
    await this.tell(() => this.store.change({ accept: true }));
  }

  protected show(place: { readonly at: readonly number[]; readonly reach: number }): void {
    const [x, y, z] = place.at as [number, number, number];
    this.place.set({ at: [x, y, z], reach: place.reach });
  }

  protected showHole(hole: HoleReport): void {
    this.show({ at: hole.centre, reach: 1.5 * hole.reach });
  }

  protected showFlat(flat: FlatArea): void {
    this.show({ at: flat.centre, reach: 0.5 * Math.sqrt(flat.area) });
  }

  protected uploadRevision(picker: HTMLInputElement): void {
    const file = picker.files?.[0];
    // So that choosing the same file again is a change again.
    picker.value = '';
    if (file) this.revisionDesk.upload(this.modelId(), file, (model) => this.store.show(model));
  }

  protected async cancelInspection(): Promise<void> {
    await this.tell(() => this.store.cancelInspection());
  }

  protected async orderPlan(order: PlanOrder): Promise<void> {
    const planId = await this.desk.order({ modelId: this.modelId(), ...order });
    if (planId) await this.router.navigate(['/plans', planId]);
  }

  protected async remove(): Promise<void> {
    const model = this.model();
    if (!model) return;
    const hindrance = removalHindrance(model);
    if (hindrance) {
      this.notes.say(hindrance);
      return;
    }
    if (!(await this.confirmations.ask(removalQuestion(model)))) return;
    const isRemoved = await this.tell(() => this.store.remove());
    if (isRemoved) await this.router.navigateByUrl('/models');
  }

  /** Runs a write; a refusal is shown and the page stays as it is. Whether it went through. */
  private async tell(write: () => Promise<void>): Promise<boolean> {
    try {
      await write();
      return true;
    } catch (failure) {
      // Expected: the record changed elsewhere, the role changed, no server.
      this.notes.show(failure);
      return false;
    }
  }
}
