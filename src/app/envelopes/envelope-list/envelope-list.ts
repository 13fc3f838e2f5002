import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sw-envelope-list',
  template: '<div class="sw-page"><h1 tabindex="-1">Envelopes</h1></div>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class EnvelopeList {}
