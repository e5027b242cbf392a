import type { DataSource } from 'typeorm';

/** Which studios there are and which rooms each has, in memory. */
export interface StudioRooms {
  studios(): readonly string[];
  studioOf(roomId: string): string | null;
  roomsOf(studioId: string): readonly string[];
  /** Reads everything again after studios or rooms changed. */
  reload(): Promise<void>;
}

/** The directory as the database has it. */
export class RoomDirectory implements StudioRooms {
  #studios: string[] = [];
  #studioOf = new Map<string, string>();
  #roomsOf = new Map<string, string[]>();

  constructor(private readonly dataSource: DataSource) {}

  async reload(): Promise<void> {
    const studios = await this.dataSource.query<{ id: string }[]>(
      'SELECT id FROM studio ORDER BY position, name',
    );
    const rooms = await this.dataSource.query<{ id: string; studio_id: string }[]>(
      'SELECT id, studio_id FROM room ORDER BY position, name',
    );
    this.#studios = studios.map(({ id }) => id);
    this.#studioOf = new Map(rooms.map((room) => [room.id, room.studio_id]));
    this.#roomsOf = new Map(
      this.#studios.map((studioId) => [
        studioId,
        rooms.filter((room) => room.studio_id === studioId).map(({ id }) => id),
      ]),
    );
  }

  studios(): readonly string[] {
    return this.#studios;
  }

  studioOf(roomId: string): string | null {
    return this.#studioOf.get(roomId) ?? null;
  }

  roomsOf(studioId: string): readonly string[] {
    return this.#roomsOf.get(studioId) ?? [];
  }
}
