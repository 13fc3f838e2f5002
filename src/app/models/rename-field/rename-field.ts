import {
  ChangeDetectionStrategy,
  Component,
  Injector,
  afterNextRender,
  inject,
  input,
  output,
  signal,
  viewChild,
  type ElementRef,
} from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton, MatIconButton } from '@angular/material/button';
import { MatError, MatFormField, MatLabel } from '@angular/material/form-field';
import { MatIcon } from '@angular/material/icon';
import { MatInput } from '@angular/material/input';

/** The page's main heading, which turns into a field while the name is being changed. */
@Component({
  selector: 'sw-rename-field',
  imports: [
    MatButton,
    MatError,
    MatFormField,
    MatIcon,
    MatIconButton,
    MatInput,
    MatLabel,
    ReactiveFormsModule,
  ],
  templateUrl: './rename-field.html',
  styleUrl: './rename-field.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RenameField {
  private readonly injector = inject(Injector);

  readonly name = input.required<string>();
  readonly isReadOnly = input(false);
  readonly renamed = output<string>();

  private readonly field = viewChild<ElementRef<HTMLInputElement>>('field');
  private readonly pen = viewChild('pen', { read: MatIconButton });

  protected readonly isOpen = signal(false);
  protected readonly form = inject(NonNullableFormBuilder).group({
    name: ['', [Validators.required, Validators.maxLength(120), Validators.pattern(/\S/)]],
  });
  protected readonly control = this.form.controls.name;

  protected open(): void {
    this.control.setValue(this.name());
    this.isOpen.set(true);
    afterNextRender(() => this.field()?.nativeElement.select(), { injector: this.injector });
  }

  protected save(): void {
    if (this.control.invalid) return;
    const name = this.control.value.trim();
    if (name !== this.name()) this.renamed.emit(name);
    this.close();
  }

  protected close(): void {
    this.isOpen.set(false);
    afterNextRender(() => this.pen()?.focus(), { injector: this.injector });
  }
}
