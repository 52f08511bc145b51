import { Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AirframeEntity } from './airframe.entity.ts';

@Entity('airframe_tag')
@Index('ix_airframe_tag_tag', ['tag'])
export class AirframeTagEntity {
  @PrimaryColumn({ name: 'airframe_id', type: 'uuid' })
  airframeId!: string;

  @PrimaryColumn({ type: 'varchar', length: 40 })
  tag!: string;

  @ManyToOne(() => AirframeEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'airframe_id', foreignKeyConstraintName: 'fk_airframe_tag_airframe' })
  airframe?: Relation<AirframeEntity>;
}
