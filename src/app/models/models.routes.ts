import { type Routes } from '@angular/router';

export const modelsRoutes: Routes = [
  {
    path: '',
    title: 'Models',
    loadComponent: () => import('./model-list/model-list').then((m) => m.ModelList),
  },
];
