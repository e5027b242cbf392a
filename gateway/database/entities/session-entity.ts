import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('session')
export class SessionEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'person_id', type: 'char', length: 36 })
  personId!: string;

  @Column({ name: 'user_agent', type: 'varchar', length: 300 })
  userAgent!: string;

  @Column({ type: 'varchar', length: 60 })
  address!: string;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ name: 'last_used_at', type: 'datetime', precision: 3 })
  lastUsedAt!: Date;

  @Column({ name: 'ended_at', type: 'datetime', precision: 3, nullable: true })
  endedAt!: Date | null;

  @Column({ name: 'ended_because', type: 'varchar', length: 40, nullable: true })
  endedBecause!: string | null;
}
