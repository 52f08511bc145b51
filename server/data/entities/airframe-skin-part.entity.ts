import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AirframeSkinEntity } from './airframe-skin.entity.ts';

@Entity('airframe_skin_part')
export class AirframeSkinPartEntity {
  @PrimaryColumn({ name: 'airframe_id', type: 'uuid' })
  airframeId!: string;

  @PrimaryColumn({ name: 'part_index', type: 'int', unsigned: true })
  index!: number;

  @ManyToOne(() => AirframeSkinEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'airframe_id', foreignKeyConstraintName: 'fk_airframe_skin_part_skin' })
  skin?: Relation<AirframeSkinEntity>;

  @Column({ type: 'mediumblob' })
  bytes!: Buffer;
}
