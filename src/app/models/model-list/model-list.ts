import { ChangeDetectionStrategy, Component } from '@angular/core';

@Component({
  selector: 'sw-model-list',
  template: '<div class="sw-page"><h1 tabindex="-1">Models</h1></div>',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class ModelList {}
