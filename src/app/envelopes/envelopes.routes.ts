import { type Routes } from '@angular/router';

export const envelopesRoutes: Routes = [
  {
    path: '',
    title: 'Envelopes',
    loadComponent: () => import('./envelope-list/envelope-list').then((m) => m.EnvelopeList),
  },
];
