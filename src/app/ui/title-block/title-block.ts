import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** One field of a title block; `wide` fields take a whole row. */
export interface TitleBlockField {
  readonly name: string;
  readonly value: string;
  readonly wide?: boolean;
}

/**
 * The title block of a sheet: small ruled boxes with the field's name above its value. Which fields
 * a sheet carries follows ISO 7200 (from memory): title, number, revision, date, made by, approved
 * by, scale, and ours, the envelope.
 */
@Component({
  selector: 'sw-title-block',
  template: `
    <dl [attr.aria-label]="label()">
      @for (field of fields(); track field.name) {
        <div [class.wide]="field.wide">
          <dt>{{ field.name }}</dt>
          <dd>{{ field.value }}</dd>
        </div>
      }
    </dl>
  `,
  styleUrl: './title-block.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TitleBlock {
  readonly fields = input.required<readonly TitleBlockField[]>();
  readonly label = input('Title block');
}
