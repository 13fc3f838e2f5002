import { type Routes } from '@angular/router';
import { PlanStore } from './plan-store';

export const plansRoutes: Routes = [
  {
    path: '',
    title: 'Plans',
    loadComponent: () => import('./plan-list/plan-list').then((m) => m.PlanList),
  },
  {
    path: ':planId',
    title: 'Plan',
    providers: [PlanStore],
    loadComponent: () => import('./plan-page/plan-page').then((m) => m.PlanPage),
  },
];
