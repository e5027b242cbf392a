import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('studio')
export class StudioEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ name: 'time_zone', type: 'varchar', length: 60 })
  timeZone!: string;

  @Column({ type: 'char', length: 1 })
  unit!: string;

  @Column({ type: 'varchar', length: 200 })
  address!: string;

  @Column({ name: 'pressure_hpa', type: 'double' })
  pressureHpa!: number;

  @Column({ name: 'quiet_from', type: 'smallint', nullable: true })
  quietFrom!: number | null;

  @Column({ name: 'quiet_to', type: 'smallint', nullable: true })
  quietTo!: number | null;

  @Column({ type: 'simple-json' })
  recipients!: string[];

  @Column({ name: 'escalate_after_minutes', type: 'int' })
  escalateAfterMinutes!: number;

  @Column({ type: 'int' })
  position!: number;

  @Column({ type: 'int' })
  version!: number;
}
