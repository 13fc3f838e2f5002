import { type Routes } from '@angular/router';
import { EnvelopesStore } from './envelopes-store';

export const envelopesRoutes: Routes = [
  {
    path: '',
    providers: [EnvelopesStore],
    children: [
      {
        path: '',
        title: 'Envelopes',
        loadComponent: () => import('./envelope-list/envelope-list').then((m) => m.EnvelopeList),
      },
      {
        path: 'new',
        title: 'New envelope',
        loadComponent: () =>
          import('./envelope-editor/envelope-editor').then((m) => m.EnvelopeEditor),
      },
      {
        path: ':envelopeId',
        title: 'Envelope',
        loadComponent: () =>
          import('./envelope-editor/envelope-editor').then((m) => m.EnvelopeEditor),
      },
    ],
  },
];
