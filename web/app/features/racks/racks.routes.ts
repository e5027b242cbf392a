import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./racks-page').then((m) => m.RacksPage) },
];
