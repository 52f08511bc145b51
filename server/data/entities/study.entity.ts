import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { OrganisationEntity } from './organisation.entity.ts';
import { PersonEntity } from './person.entity.ts';

/** A saved state of the Analysis screen. */
@Entity('study')
@Index('ix_study_changed', ['organisationId', 'changedAt'])
export class StudyEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @ManyToOne(() => OrganisationEntity)
  @JoinColumn({ name: 'organisation_id', foreignKeyConstraintName: 'fk_study_organisation' })
  organisation?: Relation<OrganisationEntity>;

  @Column({ type: 'varchar', length: 120 })
  name!: string;

  @Column({ type: 'text' })
  note!: string;

  /** Address members; parsed by studyStateSchema on the way out. */
  @Column({ type: 'json' })
  state!: unknown;

  /** Counts the saves. */
  @Column({ type: 'int', unsigned: true })
  version!: number;

  @Column({ name: 'author_id', type: 'uuid', nullable: true })
  authorId!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'author_id', foreignKeyConstraintName: 'fk_study_author' })
  author?: Relation<PersonEntity> | null;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ name: 'changed_by', type: 'uuid', nullable: true })
  changedById!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'changed_by', foreignKeyConstraintName: 'fk_study_changer' })
  changedBy?: Relation<PersonEntity> | null;

  @Column({ name: 'changed_at', type: 'datetime', precision: 3 })
  changedAt!: Date;
}
