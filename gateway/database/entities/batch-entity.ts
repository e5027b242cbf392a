import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('batch')
export class BatchEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'studio_id', type: 'char', length: 36 })
  studioId!: string;

  @Column({ type: 'varchar', length: 24 })
  code!: string;

  @Column({ name: 'design_id', type: 'char', length: 36 })
  designId!: string;

  @Column({ type: 'int' })
  vessels!: number;

  @Column({ name: 'poured_at', type: 'datetime', precision: 3 })
  pouredAt!: Date;

  @Column({ name: 'poured_by', type: 'char', length: 36, nullable: true })
  pouredBy!: string | null;

  @Column({ name: 'pour_celsius', type: 'double', nullable: true })
  pourCelsius!: number | null;

  @Column({ name: 'wax_grams', type: 'double' })
  waxGrams!: number;

  @Column({ name: 'fragrance_grams', type: 'double' })
  fragranceGrams!: number;

  @Column({ type: 'varchar', length: 12 })
  status!: string;

  @Column({ name: 'ended_at', type: 'datetime', precision: 3, nullable: true })
  endedAt!: Date | null;

  @Column({ type: 'text' })
  notes!: string;

  @Column({ type: 'int' })
  version!: number;
}
