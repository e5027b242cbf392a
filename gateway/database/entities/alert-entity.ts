import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('alert')
export class AlertEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'studio_id', type: 'char', length: 36 })
  studioId!: string;

  @Column({ name: 'room_id', type: 'char', length: 36, nullable: true })
  roomId!: string | null;

  @Column({ name: 'sensor_id', type: 'char', length: 36, nullable: true })
  sensorId!: string | null;

  @Column({ type: 'varchar', length: 20 })
  kind!: string;

  @Column({ type: 'varchar', length: 10 })
  severity!: string;

  @Column({ type: 'varchar', length: 14 })
  state!: string;

  @Column({ type: 'simple-json' })
  facts!: object;

  @Column({ name: 'raised_at', type: 'datetime', precision: 3 })
  raisedAt!: Date;

  @Column({ name: 'cleared_at', type: 'datetime', precision: 3, nullable: true })
  clearedAt!: Date | null;

  @Column({ name: 'acknowledged_by', type: 'char', length: 36, nullable: true })
  acknowledgedBy!: string | null;

  @Column({ name: 'acknowledged_at', type: 'datetime', precision: 3, nullable: true })
  acknowledgedAt!: Date | null;

  @Column({ name: 'acknowledge_note', type: 'text', nullable: true })
  acknowledgeNote!: string | null;

  @Column({ name: 'shelved_by', type: 'char', length: 36, nullable: true })
  shelvedBy!: string | null;

  @Column({ name: 'shelved_until', type: 'datetime', precision: 3, nullable: true })
  shelvedUntil!: Date | null;

  @Column({ name: 'shelve_reason', type: 'text', nullable: true })
  shelveReason!: string | null;

  @Column({ type: 'char', length: 36, nullable: true })
  holder!: string | null;

  @Column({ type: 'int' })
  escalation!: number;

  @Column({ name: 'next_escalation_at', type: 'datetime', precision: 3, nullable: true })
  nextEscalationAt!: Date | null;

  @Column({ type: 'int' })
  version!: number;
}
