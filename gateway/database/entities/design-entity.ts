import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('design')
export class DesignEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ name: 'wax_id', type: 'char', length: 36 })
  waxId!: string;

  @Column({ name: 'fragrance_id', type: 'char', length: 36, nullable: true })
  fragranceId!: string | null;

  @Column({ name: 'load_percent_of_wax', type: 'double' })
  loadPercentOfWax!: number;

  @Column({ type: 'varchar', length: 80 })
  wick!: string;

  @Column({ type: 'varchar', length: 80 })
  vessel!: string;

  @Column({ name: 'vessel_diameter_mm', type: 'double' })
  vesselDiameterMm!: number;

  @Column({ name: 'fill_grams', type: 'double' })
  fillGrams!: number;

  @Column({ type: 'int' })
  version!: number;
}
