import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./alerts-page').then((m) => m.AlertsPage) },
  {
    path: 'rules/:roomId',
    title: 'Alert rules',
    loadComponent: () => import('./rules-page').then((m) => m.RulesPage),
  },
  {
    path: ':alertId',
    title: 'Alert',
    loadComponent: () => import('./alert-page').then((m) => m.AlertPage),
  },
];
