import type { Server, Socket } from 'socket.io';
import type { ClientToServer, ServerToClient } from '#shared/contract/live';
import type { SignedInPerson } from '../http/actor.js';

/** What the server knows about a connection. */
export interface ConnectionData {
  person: SignedInPerson;
  /** Epoch ms of the system's time. */
  expiresAt: number;
  /** How many changes of people had been told when the person was looked up. */
  changesSeen: number;
  expiry: NodeJS.Timeout | undefined;
}

type NoServerEvents = Record<string, never>;
export type LiveServerSocket = Socket<ClientToServer, ServerToClient, NoServerEvents, ConnectionData>;
export type LiveIo = Server<ClientToServer, ServerToClient, NoServerEvents, ConnectionData>;

/** The parts of the engine's connection that tell how much is waiting to be sent; the library keeps them to itself. */
interface EngineInside {
  readonly writeBuffer?: readonly { readonly data?: unknown }[];
  readonly transport?: { readonly socket?: { readonly bufferedAmount?: number; terminate?: () => void } };
}

/** Bytes that wait to be sent to a client, about. */
export function waitingBytes(conn: LiveServerSocket['conn']): number {
  const { writeBuffer = [], transport } = conn as unknown as EngineInside;
  let bytes = transport?.socket?.bufferedAmount ?? 0;
  for (const { data } of writeBuffer) bytes += typeof data === 'string' ? data.length : 64;
  return bytes;
}

/** Ends a connection without waiting for what has not been sent: a client that does not read would keep it open. */
export function dropConnection(conn: LiveServerSocket['conn']): void {
  const { transport } = conn as unknown as EngineInside;
  if (transport?.socket?.terminate) transport.socket.terminate();
  else conn.close(true);
}

/** Allows so many packets at once and so many a second from then on. */
export class PacketAllowance {
  #left: number;
  #at: number;

  /** @param now milliseconds that never go back */
  constructor(
    private readonly burst: number,
    private readonly aSecond: number,
    private readonly now: () => number,
  ) {
    this.#left = burst;
    this.#at = now();
  }

  /** Counts one packet; false when it is one too many. */
  take(): boolean {
    const now = this.now();
    this.#left = Math.min(this.burst, this.#left + ((now - this.#at) / 1000) * this.aSecond);
    this.#at = now;
    this.#left -= 1;
    return this.#left >= 0;
  }
}
