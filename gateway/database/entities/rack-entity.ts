import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('rack')
export class RackEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'studio_id', type: 'char', length: 36 })
  studioId!: string;

  @Column({ name: 'room_id', type: 'char', length: 36 })
  roomId!: string;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ type: 'int' })
  position!: number;

  @Column({ type: 'int' })
  version!: number;
}
