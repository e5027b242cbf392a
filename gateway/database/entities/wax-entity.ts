import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('wax')
export class WaxEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ type: 'varchar', length: 30 })
  family!: string;

  @Column({ type: 'simple-json' })
  kinetics!: object;

  @Column({ name: 'pour_low', type: 'double' })
  pourLow!: number;

  @Column({ name: 'pour_high', type: 'double' })
  pourHigh!: number;

  @Column({ type: 'varchar', length: 500 })
  provenance!: string;

  @Column({ type: 'int' })
  version!: number;
}
