import { type Routes } from '@angular/router';

// The pages provide their own stores: a store of a route would outlive the page and go on asking the
// server, because Angular keeps a route's injector.
export const modelsRoutes: Routes = [
  {
    path: '',
    title: 'Models',
    loadComponent: () => import('./model-list/model-list').then((m) => m.ModelList),
  },
  {
    path: ':modelId',
    title: 'Model',
    loadComponent: () => import('./model-page/model-page').then((m) => m.ModelPage),
  },
];
