import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('stay')
export class StayEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'batch_id', type: 'char', length: 36 })
  batchId!: string;

  @Column({ name: 'shelf_id', type: 'char', length: 36 })
  shelfId!: string;

  @Column({ name: 'room_id', type: 'char', length: 36 })
  roomId!: string;

  @Column({ name: 'from_at', type: 'datetime', precision: 3 })
  fromAt!: Date;

  @Column({ name: 'to_at', type: 'datetime', precision: 3, nullable: true })
  toAt!: Date | null;
}
