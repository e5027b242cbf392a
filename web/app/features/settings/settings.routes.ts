import type { Routes } from '@angular/router';
import { mayAnywhereGuard } from '../../core/session/session-guards';

export const routes: Routes = [
  {
    path: '',
    loadComponent: () => import('./settings-page').then((m) => m.SettingsPage),
    children: [
      { path: '', pathMatch: 'full', redirectTo: 'account' },
      {
        path: 'account',
        title: 'Account',
        loadComponent: () => import('./account-page').then((m) => m.AccountPage),
      },
      {
        path: 'studios',
        title: 'Studios',
        canActivate: [mayAnywhereGuard('studios.write')],
        loadComponent: () => import('./studios-page').then((m) => m.StudiosPage),
      },
      {
        path: 'rooms',
        title: 'Rooms and limits',
        canActivate: [mayAnywhereGuard('rooms.write')],
        loadComponent: () => import('./room-settings-page').then((m) => m.RoomSettingsPage),
      },
      {
        path: 'racks',
        title: 'Racks and shelves',
        canActivate: [mayAnywhereGuard('racks.write')],
        loadComponent: () => import('./rack-settings-page').then((m) => m.RackSettingsPage),
      },
      {
        path: 'sensors',
        title: 'Sensors',
        canActivate: [mayAnywhereGuard('sensors.read')],
        loadComponent: () => import('./sensors-page').then((m) => m.SensorsPage),
      },
      {
        path: 'people',
        title: 'People',
        canActivate: [mayAnywhereGuard('people.read')],
        loadComponent: () => import('./people-page').then((m) => m.PeoplePage),
      },
      {
        path: 'audit',
        title: 'Audit trail',
        canActivate: [mayAnywhereGuard('audit.read')],
        loadComponent: () => import('./audit-page').then((m) => m.AuditPage),
      },
    ],
  },
];
