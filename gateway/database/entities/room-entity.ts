import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('room')
export class RoomEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'studio_id', type: 'char', length: 36 })
  studioId!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ type: 'int' })
  position!: number;

  @Column({ name: 'band_low', type: 'double' })
  bandLow!: number;

  @Column({ name: 'band_high', type: 'double' })
  bandHigh!: number;

  @Column({ name: 'heat_limit', type: 'double', nullable: true })
  heatLimit!: number | null;

  @Column({ name: 'humidity_high', type: 'double' })
  humidityHigh!: number;

  @Column({ name: 'swing_limit', type: 'double' })
  swingLimit!: number;

  @Column({ name: 'slip_days', type: 'double' })
  slipDays!: number;

  @Column({ type: 'text' })
  notes!: string;

  @Column({ type: 'simple-json', nullable: true })
  rules!: object | null;

  @Column({ type: 'int' })
  version!: number;
}
