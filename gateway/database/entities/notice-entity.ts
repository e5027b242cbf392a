import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('notice')
export class NoticeEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'person_id', type: 'char', length: 36 })
  personId!: string;

  @Column({ name: 'studio_id', type: 'char', length: 36 })
  studioId!: string;

  @Column({ name: 'alert_id', type: 'char', length: 36, nullable: true })
  alertId!: string | null;

  @Column({ type: 'datetime', precision: 3 })
  at!: Date;

  @Column({ type: 'text' })
  text!: string;

  @Column({ name: 'read_at', type: 'datetime', precision: 3, nullable: true })
  readAt!: Date | null;
}
