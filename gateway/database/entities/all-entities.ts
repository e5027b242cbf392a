import { AlertEntity } from './alert-entity.js';
import { BatchEntity } from './batch-entity.js';
import { BurnVerdictEntity } from './burn-verdict-entity.js';
import { DesignEntity } from './design-entity.js';
import { FragranceEntity } from './fragrance-entity.js';
import { MailedLinkEntity } from './mailed-link-entity.js';
import { MembershipEntity } from './membership-entity.js';
import { NoticeEntity } from './notice-entity.js';
import { PersonEntity } from './person-entity.js';
import { RackEntity } from './rack-entity.js';
import { RefreshTokenEntity } from './refresh-token-entity.js';
import { RoomEntity } from './room-entity.js';
import { SensorEntity } from './sensor-entity.js';
import { SessionEntity } from './session-entity.js';
import { ShelfEntity } from './shelf-entity.js';
import { StayEntity } from './stay-entity.js';
import { StudioEntity } from './studio-entity.js';
import { WaxEntity } from './wax-entity.js';

/** Entities with an object each; readings, rollups, outbox, steps and audit lines are written by plain statements. */
export const ALL_ENTITIES = [
  AlertEntity,
  BatchEntity,
  BurnVerdictEntity,
  DesignEntity,
  FragranceEntity,
  MailedLinkEntity,
  MembershipEntity,
  NoticeEntity,
  PersonEntity,
  RackEntity,
  RefreshTokenEntity,
  RoomEntity,
  SensorEntity,
  SessionEntity,
  ShelfEntity,
  StayEntity,
  StudioEntity,
  WaxEntity,
];
