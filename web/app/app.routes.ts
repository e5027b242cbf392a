import type { Routes } from '@angular/router';
import { mayAnywhereGuard, signedInGuard } from './core/session/session-guards';

export const routes: Routes = [
  {
    path: 'sign-in',
    title: 'Sign in',
    loadComponent: () => import('./features/sign-in/sign-in-page').then((m) => m.SignInPage),
  },
  {
    path: 'forgot-password',
    title: 'Forgotten password',
    loadComponent: () => import('./features/sign-in/forgot-password-page').then((m) => m.ForgotPasswordPage),
  },
  {
    path: 'reset-password/:token',
    title: 'New password',
    loadComponent: () => import('./features/sign-in/reset-password-page').then((m) => m.ResetPasswordPage),
  },
  {
    path: 'invitation/:token',
    title: 'Invitation',
    loadComponent: () => import('./features/sign-in/invitation-page').then((m) => m.InvitationPage),
  },
  {
    path: '',
    canActivate: [signedInGuard],
    loadComponent: () => import('./shell/shell').then((m) => m.Shell),
    children: [
      {
        path: '',
        pathMatch: 'full',
        title: 'Rooms',
        loadComponent: () => import('./features/rooms/rooms-page').then((m) => m.RoomsPage),
      },
      { path: 'rooms', pathMatch: 'full', redirectTo: '' },
      {
        path: 'rooms/:roomId',
        title: 'Room',
        loadComponent: () => import('./features/room/room-page').then((m) => m.RoomPage),
      },
      {
        path: 'racks',
        title: 'Racks',
        loadChildren: () => import('./features/racks/racks.routes').then((m) => m.routes),
      },
      {
        path: 'batches',
        title: 'Batches',
        loadChildren: () => import('./features/batches/batches.routes').then((m) => m.routes),
      },
      {
        path: 'pour',
        title: 'Pour',
        canActivate: [mayAnywhereGuard('batches.pour')],
        loadChildren: () => import('./features/pour/pour.routes').then((m) => m.routes),
      },
      {
        path: 'alerts',
        title: 'Alerts',
        canActivate: [mayAnywhereGuard('alerts.read')],
        loadChildren: () => import('./features/alerts/alerts.routes').then((m) => m.routes),
      },
      {
        path: 'compare',
        title: 'Compare',
        canActivate: [mayAnywhereGuard('compare.read')],
        loadChildren: () => import('./features/compare/compare.routes').then((m) => m.routes),
      },
      {
        path: 'materials',
        title: 'Materials',
        canActivate: [mayAnywhereGuard('materials.read')],
        loadChildren: () => import('./features/materials/materials.routes').then((m) => m.routes),
      },
      {
        path: 'settings',
        title: 'Settings',
        loadChildren: () => import('./features/settings/settings.routes').then((m) => m.routes),
      },
      {
        path: '**',
        title: 'Not found',
        loadComponent: () => import('./shell/not-found-page').then((m) => m.NotFoundPage),
      },
    ],
  },
];
