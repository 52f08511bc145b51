import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AttemptEntity } from './attempt.entity.ts';

/** What the server's own re-run gave. One a model version; a later one never replaces the one that counts. */
@Entity('attempt_result')
@Index('ix_attempt_result_record', ['attemptId', 'counts', 'passed', 'verdict', 'firstPedalS'])
@Index('ux_attempt_result_version', ['attemptId', 'modelVersion'], { unique: true })
export class AttemptResultEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'attempt_id', type: 'uuid' })
  attemptId!: string;

  @ManyToOne(() => AttemptEntity)
  @JoinColumn({ name: 'attempt_id', foreignKeyConstraintName: 'fk_attempt_result_attempt' })
  attempt?: Relation<AttemptEntity>;

  @Column({ name: 'model_version', type: 'varchar', length: 20 })
  modelVersion!: string;

  /** The first result of an attempt counts; recomputations stand beside it. */
  @Column({ type: 'boolean' })
  counts!: boolean;

  @Column({ type: 'varchar', length: 20 })
  ended!: string;

  @Column({ name: 'duration_s', type: 'double' })
  durationS!: number;

  @Column({ type: 'boolean' })
  passed!: boolean;

  /** The worst verdict among the required criteria; null when the scenario requires none. */
  @Column({ type: 'varchar', length: 20, nullable: true })
  verdict!: string | null;

  @Column({ type: 'json', nullable: true })
  worst!: unknown;

  @Column({ type: 'json' })
  criteria!: unknown;

  @Column({ type: 'json' })
  strip!: unknown;

  @Column({ name: 'state_hash', type: 'varchar', length: 16 })
  stateHash!: string;

  @Column({ name: 'states_agree', type: 'boolean' })
  statesAgree!: boolean;

  @Column({ name: 'first_difference_tick', type: 'int', unsigned: true, nullable: true })
  firstDifferenceTick!: number | null;

  @Column({ type: 'int', unsigned: true, default: 0 })
  rewinds!: number;

  /** From the first event to the first correct pedal; null when there was none or it was not computed yet. */
  @Column({ name: 'first_pedal_s', type: 'double', nullable: true })
  firstPedalS!: number | null;

  @Column({ name: 'computed_at', type: 'datetime', precision: 3 })
  computedAt!: Date;
}
