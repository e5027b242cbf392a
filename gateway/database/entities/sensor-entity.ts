import { Column, Entity, PrimaryGeneratedColumn } from 'typeorm';
import { asBoolean } from './as-boolean.js';

/** A sensor. `no` is its short key in the large tables of readings. */
@Entity('sensor')
export class SensorEntity {
  @PrimaryGeneratedColumn({ type: 'int', unsigned: true })
  no!: number;

  @Column({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'studio_id', type: 'char', length: 36 })
  studioId!: string;

  @Column({ name: 'room_id', type: 'char', length: 36 })
  roomId!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ name: 'device_id', type: 'varchar', length: 40 })
  deviceId!: string;

  @Column({ name: 'secret_hash', type: 'char', length: 64 })
  secretHash!: string;

  @Column({ type: 'tinyint', transformer: asBoolean })
  trusted!: boolean;

  @Column({ name: 'offset_celsius', type: 'double' })
  offsetCelsius!: number;

  @Column({ name: 'offset_humidity', type: 'double' })
  offsetHumidity!: number;

  @Column({ name: 'interval_seconds', type: 'int' })
  intervalSeconds!: number;

  @Column({ name: 'accept_late_days', type: 'int' })
  acceptLateDays!: number;

  @Column({ type: 'double', nullable: true })
  battery!: number | null;

  @Column({ name: 'last_heard_at', type: 'datetime', precision: 3, nullable: true })
  lastHeardAt!: Date | null;

  @Column({ name: 'future_readings', type: 'bigint' })
  futureReadings!: string;

  @Column({ type: 'bigint' })
  conflicts!: string;

  @Column({ type: 'bigint' })
  quarantined!: string;

  @Column({ name: 'retired_at', type: 'datetime', precision: 3, nullable: true })
  retiredAt!: Date | null;

  @Column({ type: 'int' })
  version!: number;
}
