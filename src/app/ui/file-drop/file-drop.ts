import { ChangeDetectionStrategy, Component, input, output, signal } from '@angular/core';
import { MatButton } from '@angular/material/button';
import { MatIcon } from '@angular/material/icon';

/** Takes files by drop or by the system's picker; says nothing about whether they are any good. */
@Component({
  selector: 'sw-file-drop',
  imports: [MatButton, MatIcon],
  template: `
    <mat-icon aria-hidden="true">upload_file</mat-icon>
    <div class="words">
      <button matButton="filled" type="button" (click)="picker.click()">{{ action() }}</button>
      <p class="sw-quiet">{{ hint() }}</p>
    </div>
    <input
      #picker
      type="file"
      hidden
      [accept]="accept()"
      multiple
      [attr.aria-label]="action()"
      (change)="takePicked(picker)"
    />
  `,
  styleUrl: './file-drop.scss',
  host: {
    '[class.over]': 'isOver()',
    '(dragenter)': 'showOver($event)',
    '(dragover)': 'showOver($event)',
    '(dragleave)': 'isOver.set(false)',
    '(drop)': 'takeDropped($event)',
    // A file dropped beside the field must not make the browser leave the page.
    '(document:dragover)': '$event.preventDefault()',
    '(document:drop)': '$event.preventDefault()',
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class FileDrop {
  readonly action = input('Choose files');
  readonly hint = input('');
  /** Endings for the picker, for example ".stl". */
  readonly accept = input('');
  readonly filesChosen = output<readonly File[]>();

  protected readonly isOver = signal(false);

  protected showOver(event: DragEvent): void {
    event.preventDefault();
    this.isOver.set(true);
  }

  protected takeDropped(event: DragEvent): void {
    event.preventDefault();
    this.isOver.set(false);
    this.pass(event.dataTransfer?.files);
  }

  protected takePicked(picker: HTMLInputElement): void {
    this.pass(picker.files);
    // So that choosing the same file again is a change again.
    picker.value = '';
  }

  private pass(files: FileList | null | undefined): void {
    if (files && files.length > 0) this.filesChosen.emit([...files]);
  }
}
