import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./materials-page').then((m) => m.MaterialsPage) },
];
