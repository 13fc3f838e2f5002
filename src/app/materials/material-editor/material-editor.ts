import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  signal,
} from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatCheckbox } from '@angular/material/checkbox';
import { MatFormField, MatHint, MatLabel, MatSuffix } from '@angular/material/form-field';
import { MatInput } from '@angular/material/input';
import { MatOption, MatSelect } from '@angular/material/select';
import { MatProgressBar } from '@angular/material/progress-bar';
import { MatSnackBar } from '@angular/material/snack-bar';
import { Router, RouterLink } from '@angular/router';
import {
  type MaterialProfile,
  materialPresets,
  usualMaterial,
} from '../../../../shared/jobs/material-profile.js';
import { SessionStore } from '../../core/auth/session-store';
import { sentenceFor } from '../../core/http/api-failure';
import { PageTitle } from '../../core/layout/page-title';
import { Notice } from '../../ui/notice/notice';
import { allFields, fieldGroups, fieldProblems, readField, withFields } from '../material-fields';
import { MaterialsApi } from '../materials-api';

/** One material: a new one, one to change, or, for readers, one to look at. */
@Component({
  selector: 'sw-material-editor',
  imports: [
    MatButton,
    MatCheckbox,
    MatFormField,
    MatHint,
    MatInput,
    MatLabel,
    MatOption,
    MatProgressBar,
    MatSelect,
    MatSuffix,
    Notice,
    RouterLink,
  ],
  templateUrl: './material-editor.html',
  styleUrl: './material-editor.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class MaterialEditor {
  private readonly api = inject(MaterialsApi);
  private readonly sessions = inject(SessionStore);
  private readonly router = inject(Router);
  private readonly snackBar = inject(MatSnackBar);
  private readonly title = inject(PageTitle);

  /** Absent for a new material. */
  readonly materialId = input<string>();

  protected readonly groups = fieldGroups;
  protected readonly presets = materialPresets;
  protected readonly heading = signal('New material');
  protected readonly isLoading = signal(false);
  protected readonly isSaving = signal(false);
  protected readonly problem = signal('');
  protected readonly mayWrite = computed(() => this.sessions.can('material.write'));
  private readonly profile = signal<MaterialProfile>(usualMaterial);
  private version: number | undefined;

  protected readonly name = signal(usualMaterial.name);
  protected readonly glueName = signal(usualMaterial.glue.name);
  protected readonly isShrinkageApplied = signal(usualMaterial.isShrinkageApplied);
  protected readonly values = signal<Readonly<Record<string, number | null>>>(
    valuesOf(usualMaterial),
  );
  protected readonly problems = computed(() => fieldProblems(this.profile(), this.values()));

  constructor() {
    effect(() => {
      const id = this.materialId();
      if (id) void this.load(id);
    });
  }

  protected startFrom(profile: MaterialProfile): void {
    this.show(profile);
  }

  protected write(path: string, event: Event): void {
    const { valueAsNumber } = event.target as HTMLInputElement;
    const value = Number.isFinite(valueAsNumber) ? valueAsNumber : null;
    this.values.update((now) => ({ ...now, [path]: value }));
  }

  protected textOf(event: Event): string {
    return (event.target as HTMLInputElement).value;
  }

  protected async save(): Promise<void> {
    this.problem.set('');
    const name = this.name().trim();
    const glueName = this.glueName().trim();
    if (name === '' || glueName === '') {
      this.problem.set('Give the material and its glue a name.');
      return;
    }
    if (Object.keys(this.problems()).length > 0) {
      this.problem.set('Some fields need another look; they say what is wrong.');
      return;
    }
    const numbers = withFields(this.profile(), this.values());
    const profile: MaterialProfile = {
      ...numbers,
      name,
      isShrinkageApplied: this.isShrinkageApplied(),
      glue: { ...numbers.glue, name: glueName },
    };
    this.isSaving.set(true);
    try {
      const id = this.materialId();
      await (id
        ? this.api.replace(id, { profile, version: this.version })
        : this.api.create({ profile }));
      this.snackBar.open(`${name} is saved.`, undefined, { duration: 4_000 });
      await this.router.navigateByUrl('/materials');
    } catch (failure) {
      // Expected: a name that is taken, a change by someone else, no server.
      this.problem.set(sentenceFor(failure));
    } finally {
      this.isSaving.set(false);
    }
  }

  private async load(id: string): Promise<void> {
    this.isLoading.set(true);
    try {
      const { profile, version } = await this.api.get(id);
      this.version = version;
      this.show(profile);
      this.heading.set(profile.name);
      this.title.set(profile.name);
    } catch (failure) {
      // Expected: an old address, or no server.
      this.problem.set(sentenceFor(failure));
      this.heading.set('Material');
    } finally {
      this.isLoading.set(false);
    }
  }

  private show(profile: MaterialProfile): void {
    this.profile.set(profile);
    this.name.set(profile.name);
    this.glueName.set(profile.glue.name);
    this.isShrinkageApplied.set(profile.isShrinkageApplied);
    this.values.set(valuesOf(profile));
  }
}

function valuesOf(profile: MaterialProfile): Record<string, number | null> {
  return Object.fromEntries(allFields.map(({ path }) => [path, readField(profile, path)]));
}
