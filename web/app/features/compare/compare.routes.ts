import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./compare-page').then((m) => m.ComparePage) },
];
