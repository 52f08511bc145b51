import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AirframeEntity } from './airframe.entity.ts';
import { PersonEntity } from './person.entity.ts';

/** An optional model drawn in place of the computed one; its bytes are in parts, below any packet limit. */
@Entity('airframe_skin')
export class AirframeSkinEntity {
  @PrimaryColumn({ name: 'airframe_id', type: 'uuid' })
  airframeId!: string;

  @ManyToOne(() => AirframeEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'airframe_id', foreignKeyConstraintName: 'fk_airframe_skin_airframe' })
  airframe?: Relation<AirframeEntity>;

  @Column({ name: 'file_name', type: 'varchar', length: 200 })
  fileName!: string;

  @Column({ name: 'byte_count', type: 'int', unsigned: true })
  byteCount!: number;

  @Column({ type: 'varchar', length: 64 })
  sha256!: string;

  @Column({ name: 'uploaded_by', type: 'uuid', nullable: true })
  uploadedById!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'uploaded_by', foreignKeyConstraintName: 'fk_airframe_skin_uploader' })
  uploadedBy?: Relation<PersonEntity> | null;

  @Column({ name: 'uploaded_at', type: 'datetime', precision: 3 })
  uploadedAt!: Date;
}
