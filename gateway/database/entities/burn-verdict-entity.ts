import { Column, Entity, PrimaryColumn } from 'typeorm';
import { asBoolean } from './as-boolean.js';

@Entity('burn_verdict')
export class BurnVerdictEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'batch_id', type: 'char', length: 36 })
  batchId!: string;

  @Column({ name: 'design_id', type: 'char', length: 36 })
  designId!: string;

  @Column({ type: 'datetime', precision: 3 })
  at!: Date;

  @Column({ type: 'tinyint', transformer: asBoolean })
  passed!: boolean;

  @Column({ type: 'text' })
  note!: string;

  @Column({ name: 'signed_by', type: 'char', length: 36 })
  signedBy!: string;

  @Column({ name: 'hardening_at_test', type: 'double' })
  hardeningAtTest!: number;

  @Column({ name: 'cure_age_days', type: 'double' })
  cureAgeDays!: number;
}
