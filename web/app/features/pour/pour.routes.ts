import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./pour-page').then((m) => m.PourPage) },
];
