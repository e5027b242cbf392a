import type { DataSource } from 'typeorm';
import type { Room, RoomLimits } from '#shared/contract/rooms';
import { RoomEntity } from '../../database/entities/room-entity.js';
import { type AuditLine, appendAudit } from '../audit/audit-lines.js';

export interface RoomFields {
  readonly name: string;
  readonly position: number;
  readonly limits: RoomLimits;
  readonly notes: string;
}

/** Rooms of studios. Every read and write names the studio. */
export class RoomsRepository {
  constructor(private readonly dataSource: DataSource) {}

  async list(studioId: string): Promise<Room[]> {
    const rows = await this.dataSource
      .getRepository(RoomEntity)
      .find({ where: { studioId }, order: { position: 'ASC', name: 'ASC' } });
    return rows.map(toRoom);
  }

  async find(studioId: string, roomId: string): Promise<Room | null> {
    const row = await this.dataSource.getRepository(RoomEntity).findOne({ where: { id: roomId, studioId } });
    return row ? toRoom(row) : null;
  }

  async insert(studioId: string, id: string, fields: RoomFields, audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      await manager.insert(RoomEntity, { id, studioId, version: 1, rules: null, ...toColumns(fields) });
      await appendAudit(manager, audit);
    });
  }

  /** False when the version is no longer the current one; nothing is changed then. */
  async update(
    studioId: string,
    roomId: string,
    version: number,
    fields: RoomFields,
    audit: AuditLine,
  ): Promise<boolean> {
    return this.dataSource.transaction(async (manager) => {
      const result = await manager.update(
        RoomEntity,
        { id: roomId, studioId, version },
        { ...toColumns(fields), version: version + 1 },
      );
      if (result.affected !== 1) return false;
      await appendAudit(manager, audit);
      return true;
    });
  }

  /** Whether anything refers to the room that must not be lost. */
  async inUse(roomId: string): Promise<boolean> {
    const [row] = await this.dataSource.query<{ used: number | string }[]>(
      `SELECT EXISTS (SELECT 1 FROM rack WHERE room_id = ?) OR EXISTS (SELECT 1 FROM sensor WHERE room_id = ?) OR EXISTS (SELECT 1 FROM stay WHERE room_id = ?) AS used`,
      [roomId, roomId, roomId],
    );
    return Number(row?.used) === 1;
  }

  async remove(studioId: string, roomId: string, audit: AuditLine): Promise<void> {
    await this.dataSource.transaction(async (manager) => {
      await manager.delete(RoomEntity, { id: roomId, studioId });
      await appendAudit(manager, audit);
    });
  }
}

function toRoom(row: RoomEntity): Room {
  return {
    id: row.id,
    studioId: row.studioId,
    name: row.name,
    position: row.position,
    limits: {
      bandLow: row.bandLow,
      bandHigh: row.bandHigh,
      heatLimit: row.heatLimit,
      humidityHigh: row.humidityHigh,
      swingLimit: row.swingLimit,
      slipDays: row.slipDays,
    },
    notes: row.notes,
    version: row.version,
  };
}

function toColumns(fields: RoomFields) {
  return { name: fields.name, position: fields.position, notes: fields.notes, ...fields.limits };
}
