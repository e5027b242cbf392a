import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('shelf')
export class ShelfEntity {
  @PrimaryColumn({ type: 'char', length: 36 })
  id!: string;

  @Column({ name: 'rack_id', type: 'char', length: 36 })
  rackId!: string;

  @Column({ type: 'int' })
  position!: number;

  @Column({ type: 'int' })
  capacity!: number;

  /** Set when the shelf no longer exists; its past stays remain. */
  @Column({ name: 'taken_away_at', type: 'datetime', precision: 3, nullable: true })
  takenAwayAt!: Date | null;
}
