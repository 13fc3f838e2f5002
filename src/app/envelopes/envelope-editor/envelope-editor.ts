import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
} from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { ReactiveFormsModule } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import { MatError, MatFormField, MatHint, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatProgressBar } from '@angular/material/progress-bar';
import { MatRadioButton, MatRadioGroup } from '@angular/material/radio';
import { MatSnackBar } from '@angular/material/snack-bar';
import { Router, RouterLink } from '@angular/router';
import { map } from 'rxjs';
import { type EnvelopeResponse } from '../../../../shared/api/envelopes.contract.js';
import { SessionStore } from '../../core/auth/session-store';
import { placeFieldFailures } from '../../core/forms/field-failures';
import { ApiFailure, sentenceFor } from '../../core/http/api-failure';
import { PageTitle } from '../../core/layout/page-title';
import { Notice } from '../../ui/notice/notice';
import { EnvelopeDrawing } from '../envelope-drawing/envelope-drawing';
import { buildEnvelopeForm, envelopeRequestFrom, fillEnvelopeForm } from '../envelope-form';
import { envelopeFacts } from '../envelope-words';
import { EnvelopesApi } from '../envelopes-api';
import { EnvelopesStore } from '../envelopes-store';

/** One envelope: a new one, one to change, or, for readers, one to look at. */
@Component({
  selector: 'sw-envelope-editor',
  imports: [
    EnvelopeDrawing,
    MatButton,
    MatError,
    MatFormField,
    MatHint,
    MatInput,
    MatLabel,
    MatProgressBar,
    MatRadioButton,
    MatRadioGroup,
    MatSuffix,
    Notice,
    ReactiveFormsModule,
    RouterLink,
  ],
  templateUrl: './envelope-editor.html',
  styleUrl: './envelope-editor.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EnvelopeEditor {
  private readonly api = inject(EnvelopesApi);
  private readonly store = inject(EnvelopesStore);
  private readonly sessions = inject(SessionStore);
  private readonly router = inject(Router);
  private readonly snackBar = inject(MatSnackBar);
  private readonly title = inject(PageTitle);

  /** Absent for a new envelope. */
  readonly envelopeId = input<string>();

  protected readonly form = buildEnvelopeForm();
  protected readonly heading = signal('New envelope');
  protected readonly isLoading = signal(false);
  protected readonly isSaving = signal(false);
  protected readonly problem = signal('');
  private readonly _envelope = signal<EnvelopeResponse | null>(null);
  protected readonly facts = computed(() => {
    const envelope = this._envelope();
    return envelope && envelopeFacts(envelope);
  });
  protected readonly mayWrite = computed(() => this.sessions.can('envelope.write'));
  protected readonly measures = toSignal(
    this.form.valueChanges.pipe(map(() => this.form.getRawValue())),
    { initialValue: this.form.getRawValue() },
  );
  protected readonly lengths = computed(() => {
    const depth = { key: 'depthMm', name: 'Depth' } as const;
    const height = { key: 'heightMm', name: 'Height' } as const;
    return this.measures().shape === 'round'
      ? ([{ key: 'diameterMm', name: 'Diameter' }, height] as const)
      : ([{ key: 'widthMm', name: 'Width' }, depth, height] as const);
  });

  constructor() {
    effect(() => {
      const id = this.envelopeId();
      if (id) void this.load(id);
    });
  }

  protected async save(): Promise<void> {
    this.problem.set('');
    if (this.form.invalid) {
      this.form.markAllAsTouched();
      this.problem.set('Some fields need another look; they say what they expect.');
      return;
    }
    this.isSaving.set(true);
    const id = this.envelopeId();
    const request = envelopeRequestFrom(this.form);
    try {
      await (id ? this.store.replace(id, request) : this.store.create(request));
      this.snackBar.open(`${request.name} is saved.`, undefined, { duration: 4_000 });
      await this.router.navigateByUrl('/envelopes');
    } catch (failure) {
      // Expected: a name that is taken, a limit the server knows better, no server.
      this.problem.set(this.placeFailure(failure));
    } finally {
      this.isSaving.set(false);
    }
  }

  private placeFailure(failure: unknown): string {
    return failure instanceof ApiFailure
      ? placeFieldFailures(this.form, failure)
      : sentenceFor(failure);
  }

  private async load(id: string): Promise<void> {
    this.isLoading.set(true);
    try {
      const envelope = await this.api.get(id);
      fillEnvelopeForm(this.form, envelope);
      this.heading.set(envelope.name);
      this.title.set(envelope.name);
      this._envelope.set(envelope);
    } catch (failure) {
      // Expected: an old address, or no server.
      this.problem.set(sentenceFor(failure));
      this.heading.set('Envelope');
    } finally {
      this.isLoading.set(false);
    }
  }
}
