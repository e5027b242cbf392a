import { InjectionToken } from '@angular/core';
import type { Socket } from 'socket.io-client';
import type { ClientToServer, ServerToClient } from '#shared/contract/live';

export type LiveSocket = Socket<ServerToClient, ClientToServer>;

/** Opens a socket that is not connected yet; `token` is asked for each time it connects. */
export type OpenLiveSocket = (token: () => Promise<string | null>) => Promise<LiveSocket>;

/** The socket library is loaded only when somebody is signed in; WebSocket is the only transport. */
export const OPEN_LIVE_SOCKET = new InjectionToken<OpenLiveSocket>('live socket', {
  providedIn: 'root',
  factory: () => async (token) => {
    const { io } = await import('socket.io-client');
    const socket: LiveSocket = io({
      autoConnect: false,
      transports: ['websocket'],
      reconnectionDelay: 500,
      reconnectionDelayMax: 5000,
      auth: (done) => void token().then((accessToken) => done({ token: accessToken })),
    });
    return socket;
  },
});
