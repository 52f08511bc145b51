import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AirframeEntity } from './airframe.entity.ts';
import { PersonEntity } from './person.entity.ts';

/** Draft, then released, then retired; triggers keep a released or retired one as it was. */
@Entity('airframe_revision')
@Index('ux_airframe_revision_number', ['airframeId', 'number'], { unique: true })
@Index('ix_airframe_revision_status', ['organisationId', 'status', 'changedAt'])
export class AirframeRevisionEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @Column({ name: 'airframe_id', type: 'uuid' })
  airframeId!: string;

  @ManyToOne(() => AirframeEntity)
  @JoinColumn({ name: 'airframe_id', foreignKeyConstraintName: 'fk_airframe_revision_airframe' })
  airframe?: Relation<AirframeEntity>;

  @Column({ type: 'int', unsigned: true })
  number!: number;

  @Column({ type: 'enum', enum: ['draft', 'released', 'retired'] })
  status!: 'draft' | 'released' | 'retired';

  // Copies from the document, for lists.
  @Column({ type: 'varchar', length: 200 })
  name!: string;

  @Column({ name: 'airplane_class', type: 'varchar', length: 8 })
  airplaneClass!: string;

  @Column({ name: 'engine_count', type: 'int', unsigned: true })
  engineCount!: number;

  /** The `sidewash.airframe/1` document as it was given. */
  @Column({ type: 'json' })
  document!: unknown;

  /** Why this revision exists. */
  @Column({ type: 'text' })
  note!: string;

  @Column({ name: 'created_by', type: 'uuid', nullable: true })
  createdById!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'created_by', foreignKeyConstraintName: 'fk_airframe_revision_author' })
  createdBy?: Relation<PersonEntity> | null;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ name: 'released_by', type: 'uuid', nullable: true })
  releasedById!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'released_by', foreignKeyConstraintName: 'fk_airframe_revision_releaser' })
  releasedBy?: Relation<PersonEntity> | null;

  @Column({ name: 'released_at', type: 'datetime', precision: 3, nullable: true })
  releasedAt!: Date | null;

  @Column({ name: 'retired_at', type: 'datetime', precision: 3, nullable: true })
  retiredAt!: Date | null;

  /** Warnings of the data as answered at release; null for a draft. */
  @Column({ name: 'release_answers', type: 'json', nullable: true })
  releaseAnswers!: unknown;

  /** Counts the saves of a draft. */
  @Column({ type: 'int', unsigned: true })
  version!: number;

  @Column({ name: 'changed_by', type: 'uuid', nullable: true })
  changedById!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'changed_by', foreignKeyConstraintName: 'fk_airframe_revision_changer' })
  changedBy?: Relation<PersonEntity> | null;

  /** Last change of the data or the status. */
  @Column({ name: 'changed_at', type: 'datetime', precision: 3 })
  changedAt!: Date;
}
