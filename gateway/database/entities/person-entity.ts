import { Column, Entity, PrimaryColumn } from 'typeorm';
import { asBoolean } from './as-boolean.js';

@Entity('person')
export class PersonEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ type: 'varchar', length: 200 })
  email!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ name: 'password_hash', type: 'varchar', length: 200, nullable: true })
  passwordHash!: string | null;

  @Column({ type: 'tinyint', transformer: asBoolean })
  owner!: boolean;

  @Column({ type: 'tinyint', transformer: asBoolean })
  disabled!: boolean;

  @Column({ name: 'token_version', type: 'int' })
  tokenVersion!: number;

  @Column({ name: 'last_seen_at', type: 'datetime', precision: 3, nullable: true })
  lastSeenAt!: Date | null;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ type: 'int' })
  version!: number;
}
