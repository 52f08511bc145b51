import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AirframeRevisionEntity } from './airframe-revision.entity.ts';
import { PersonEntity } from './person.entity.ts';
import { ScenarioEntity } from './scenario.entity.ts';

/** Draft, then published, then archived; triggers keep a published or archived one as it was. */
@Entity('scenario_revision')
@Index('ux_scenario_revision_number', ['scenarioId', 'number'], { unique: true })
@Index('ix_scenario_revision_status', ['organisationId', 'status', 'title'])
@Index('ix_scenario_revision_airframe', ['airframeRevisionId'])
export class ScenarioRevisionEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @Column({ name: 'scenario_id', type: 'uuid' })
  scenarioId!: string;

  @ManyToOne(() => ScenarioEntity)
  @JoinColumn({ name: 'scenario_id', foreignKeyConstraintName: 'fk_scenario_revision_scenario' })
  scenario?: Relation<ScenarioEntity>;

  @Column({ type: 'int', unsigned: true })
  number!: number;

  @Column({ type: 'enum', enum: ['draft', 'published', 'archived'] })
  status!: 'draft' | 'published' | 'archived';

  // Copies from the document, for lists.
  @Column({ type: 'varchar', length: 200 })
  title!: string;

  @Column({ type: 'text' })
  summary!: string;

  @Column({ type: 'text' })
  purpose!: string;

  @Column({ name: 'duration_s', type: 'double' })
  durationS!: number;

  @Column({ name: 'criterion_count', type: 'int', unsigned: true })
  criterionCount!: number;

  /** Marks of the small time line; see scenarioSummarySchema. */
  @Column({ type: 'json' })
  lanes!: unknown;

  /** The `sidewash.scenario/1` document as it was given. */
  @Column({ type: 'json' })
  document!: unknown;

  /** The pinned airframe revision. */
  @Column({ name: 'airframe_revision_id', type: 'uuid' })
  airframeRevisionId!: string;

  @ManyToOne(() => AirframeRevisionEntity)
  @JoinColumn({ name: 'airframe_revision_id', foreignKeyConstraintName: 'fk_scenario_revision_airframe' })
  airframeRevision?: Relation<AirframeRevisionEntity>;

  @Column({ type: 'text' })
  note!: string;

  @Column({ name: 'created_by', type: 'uuid', nullable: true })
  createdById!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'created_by', foreignKeyConstraintName: 'fk_scenario_revision_author' })
  createdBy?: Relation<PersonEntity> | null;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ name: 'published_by', type: 'uuid', nullable: true })
  publishedById!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'published_by', foreignKeyConstraintName: 'fk_scenario_revision_publisher' })
  publishedBy?: Relation<PersonEntity> | null;

  @Column({ name: 'published_at', type: 'datetime', precision: 3, nullable: true })
  publishedAt!: Date | null;

  @Column({ name: 'changed_by', type: 'uuid', nullable: true })
  changedById?: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'changed_by', foreignKeyConstraintName: 'fk_scenario_revision_changer' })
  changedBy?: Relation<PersonEntity> | null;

  /** Counts the saves of a draft. */
  @Column({ type: 'int', unsigned: true, default: 1 })
  version!: number;

  @Column({ name: 'archived_at', type: 'datetime', precision: 3, nullable: true })
  archivedAt!: Date | null;

  /** Last change of the data or the status. */
  @Column({ name: 'changed_at', type: 'datetime', precision: 3 })
  changedAt!: Date;
}
