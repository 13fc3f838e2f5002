import { type Routes } from '@angular/router';

const editor = () =>
  import('./material-editor/material-editor').then((module) => module.MaterialEditor);

export const materialsRoutes: Routes = [
  {
    path: '',
    title: 'Materials',
    loadComponent: () =>
      import('./material-list/material-list').then((module) => module.MaterialList),
  },
  { path: 'new', title: 'New material', loadComponent: editor },
  { path: ':materialId', title: 'Material', loadComponent: editor },
];
