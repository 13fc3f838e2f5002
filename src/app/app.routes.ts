import { type Routes } from '@angular/router';
import { requireNoSession, requireSession } from './core/auth/session-guards';

export const routes: Routes = [
  {
    path: 'sign-in',
    title: 'Sign in',
    canActivate: [requireNoSession],
    loadComponent: () => import('./sign-in/sign-in').then((m) => m.SignIn),
  },
  {
    path: 'no-server',
    title: 'No answer',
    loadComponent: () => import('./core/errors/no-server').then((m) => m.NoServer),
  },
  {
    path: '',
    canActivate: [requireSession],
    loadComponent: () => import('./core/layout/shell').then((m) => m.Shell),
    children: [
      { path: '', pathMatch: 'full', redirectTo: 'models' },
      {
        path: 'models/:modelId/cut-preview',
        title: 'Try a cut',
        loadComponent: () => import('./viewer/cut-preview/cut-preview').then((m) => m.CutPreview),
      },
      {
        path: 'models',
        loadChildren: () => import('./models/models.routes').then((m) => m.modelsRoutes),
      },
      {
        path: 'envelopes',
        loadChildren: () => import('./envelopes/envelopes.routes').then((m) => m.envelopesRoutes),
      },
      {
        path: 'materials',
        loadChildren: () => import('./materials/materials.routes').then((m) => m.materialsRoutes),
      },
      {
        path: 'plans',
        loadChildren: () => import('./plans/plans.routes').then((m) => m.plansRoutes),
      },
      {
        path: '**',
        title: 'No such page',
        loadComponent: () => import('./core/errors/not-found').then((m) => m.NotFound),
      },
    ],
  },
];
