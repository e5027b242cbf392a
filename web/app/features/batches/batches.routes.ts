import type { Routes } from '@angular/router';

export const routes: Routes = [
  { path: '', loadComponent: () => import('./batches-page').then((m) => m.BatchesPage) },
  { path: ':batchId', title: 'Batch', loadComponent: () => import('./batch-page').then((m) => m.BatchPage) },
];
