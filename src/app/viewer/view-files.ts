import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import { type ViewParts } from './scene/view-parts';

/** Fetches picture files. They go through HttpClient so that an ended session is renewed first. */
@Injectable({ providedIn: 'root' })
export class ViewFiles {
  private readonly http = inject(HttpClient);

  /** A plan's picture: pieces and seams in the assembled frame, mm. */
  planView(planId: string): Promise<ViewParts> {
    return this.load(`/api/plans/${planId}/view`);
  }

  /** A model's picture, in the unit of its file. */
  modelView(modelId: string): Promise<ViewParts> {
    return this.load(`/api/models/${modelId}/view`);
  }

  private async load(url: string): Promise<ViewParts> {
    // The reader brings three.js with it, so it comes only when there is something to read.
    const [bytes, { loadView }] = await Promise.all([
      firstValueFrom(this.http.get(url, { responseType: 'arraybuffer' })),
      import('./scene/load-view'),
    ]);
    return loadView(bytes);
  }
}
