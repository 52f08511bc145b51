import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AirframeRevisionEntity } from './airframe-revision.entity.ts';
import { StudyEntity } from './study.entity.ts';

/** An airframe revision that a study pins: position 0 is the one looked at, then those compared with it. */
@Entity('study_airframe')
@Index('ix_study_airframe_revision', ['airframeRevisionId'])
export class StudyAirframeEntity {
  @PrimaryColumn({ name: 'study_id', type: 'uuid' })
  studyId!: string;

  @PrimaryColumn({ type: 'int', unsigned: true })
  position!: number;

  @ManyToOne(() => StudyEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'study_id', foreignKeyConstraintName: 'fk_study_airframe_study' })
  study?: Relation<StudyEntity>;

  @Column({ name: 'airframe_revision_id', type: 'uuid' })
  airframeRevisionId!: string;

  @ManyToOne(() => AirframeRevisionEntity)
  @JoinColumn({ name: 'airframe_revision_id', foreignKeyConstraintName: 'fk_study_airframe_revision' })
  airframeRevision?: Relation<AirframeRevisionEntity>;
}
