import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('fragrance')
export class FragranceEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ name: 'flash_point', type: 'double', nullable: true })
  flashPoint!: number | null;

  @Column({ name: 'certificate_max_load', type: 'double', nullable: true })
  certificateMaxLoad!: number | null;

  @Column({ type: 'int' })
  version!: number;
}
