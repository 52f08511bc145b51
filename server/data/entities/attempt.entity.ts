import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import type { AttemptResultEntity } from './attempt-result.entity.ts';
import { ClassMemberEntity } from './class-member.entity.ts';
import { PersonEntity } from './person.entity.ts';
import { ScenarioRevisionEntity } from './scenario-revision.entity.ts';
import { ScenarioEntity } from './scenario.entity.ts';

/** One flight of a person on a scenario revision. Its scenario, seed and drawn values are fixed at the start. */
@Entity('attempt')
@Index('ux_attempt_number', ['personId', 'scenarioId', 'number'], { unique: true })
@Index('ux_attempt_start_key', ['personId', 'startKey'], { unique: true })
@Index('ix_attempt_person_started', ['organisationId', 'personId', 'startedAt'])
@Index('ix_attempt_scenario', ['scenarioId', 'personId'])
export class AttemptEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  /** Null when a guest of a class flew it. */
  @Column({ name: 'person_id', type: 'uuid', nullable: true })
  personId!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'person_id', foreignKeyConstraintName: 'fk_attempt_person' })
  person?: Relation<PersonEntity>;

  @Column({ name: 'guest_id', type: 'uuid', nullable: true })
  guestId!: string | null;

  @ManyToOne(() => ClassMemberEntity)
  @JoinColumn({ name: 'guest_id', foreignKeyConstraintName: 'fk_attempt_guest' })
  guest?: Relation<ClassMemberEntity>;

  @Column({ name: 'scenario_id', type: 'uuid' })
  scenarioId!: string;

  @ManyToOne(() => ScenarioEntity)
  @JoinColumn({ name: 'scenario_id', foreignKeyConstraintName: 'fk_attempt_scenario' })
  scenario?: Relation<ScenarioEntity>;

  @Column({ name: 'scenario_revision_id', type: 'uuid' })
  scenarioRevisionId!: string;

  @ManyToOne(() => ScenarioRevisionEntity)
  @JoinColumn({ name: 'scenario_revision_id', foreignKeyConstraintName: 'fk_attempt_scenario_revision' })
  scenarioRevision?: Relation<ScenarioRevisionEntity>;

  /** Counts this person's starts of this scenario, any revision, from 1. */
  @Column({ type: 'int', unsigned: true })
  number!: number;

  /** Made by the client once per start, so that a repeated request starts nothing twice. */
  @Column({ name: 'start_key', type: 'uuid', nullable: true })
  startKey!: string | null;

  @Column({ type: 'int', unsigned: true })
  seed!: number;

  @Column({ type: 'json' })
  drawn!: unknown;

  @Column({ name: 'chunk_key', type: 'varchar', length: 16 })
  chunkKey!: string;

  /** Of the server at the start; the result carries the version that computed it. */
  @Column({ name: 'model_version', type: 'varchar', length: 20 })
  modelVersion!: string;

  @Column({ type: 'enum', enum: ['flying', 'complete'] })
  status!: 'flying' | 'complete';

  @Column({ name: 'started_at', type: 'datetime', precision: 3 })
  startedAt!: Date;

  @Column({ name: 'last_chunk_at', type: 'datetime', precision: 3, nullable: true })
  lastChunkAt!: Date | null;

  @Column({ name: 'completed_at', type: 'datetime', precision: 3, nullable: true })
  completedAt!: Date | null;

  /** The result that counts, where a query joins it (leftJoinAndMapOne); not a column. */
  result?: Relation<AttemptResultEntity> | null;
}
