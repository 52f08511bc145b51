import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AirframeEntity } from './airframe.entity.ts';

/** What lists show of an airframe: its newest revision, and its newest of each status. Narrow, so that a list is one short read. */
@Entity('airframe_listing')
@Index('ix_airframe_listing_name', ['organisationId', 'listedAs', 'name', 'airframeId'])
@Index('ix_airframe_listing_changed', ['organisationId', 'listedAs', 'changedAt', 'airframeId'])
export class AirframeListingEntity {
  @PrimaryColumn({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @PrimaryColumn({ name: 'listed_as', type: 'varchar', length: 10 })
  listedAs!: 'any' | 'draft' | 'released' | 'retired';

  @PrimaryColumn({ name: 'airframe_id', type: 'uuid' })
  airframeId!: string;

  @ManyToOne(() => AirframeEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'airframe_id', foreignKeyConstraintName: 'fk_airframe_listing_airframe' })
  airframe?: Relation<AirframeEntity>;

  @Column({ type: 'varchar', length: 80 })
  slug!: string;

  @Column({ type: 'int', unsigned: true })
  number!: number;

  @Column({ type: 'enum', enum: ['draft', 'released', 'retired'] })
  status!: 'draft' | 'released' | 'retired';

  @Column({ type: 'varchar', length: 200 })
  name!: string;

  @Column({ name: 'airplane_class', type: 'varchar', length: 8 })
  airplaneClass!: string;

  @Column({ name: 'engine_count', type: 'int', unsigned: true })
  engineCount!: number;

  @Column({ name: 'engine_kind', type: 'varchar', length: 10 })
  engineKind!: string;

  /** As given, a line each. */
  @Column({ type: 'text' })
  tags!: string;

  /** Tags as they are compared, each between line ends. */
  @Column({ name: 'tag_keys', type: 'text', collation: 'utf8mb4_bin' })
  tagKeys!: string;

  /** Everything a search looks through, as it is compared. */
  @Column({ name: 'search_key', type: 'text', collation: 'utf8mb4_bin' })
  searchKey!: string;

  @Column({ name: 'changed_at', type: 'datetime', precision: 3 })
  changedAt!: Date;
}
