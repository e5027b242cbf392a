import { Column, Entity, PrimaryColumn } from 'typeorm';

@Entity('membership')
export class MembershipEntity {
  @PrimaryColumn({ name: 'person_id', type: 'char', length: 36 })
  personId!: string;

  @PrimaryColumn({ name: 'studio_id', type: 'char', length: 36 })
  studioId!: string;

  @Column({ type: 'varchar', length: 10 })
  role!: string;
}
