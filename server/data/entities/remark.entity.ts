import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AttemptEntity } from './attempt.entity.ts';
import { PersonEntity } from './person.entity.ts';

/** A remark on an attempt, pinned to a tick. Triggers allow nothing but withdrawing it. */
@Entity('remark')
@Index('ix_remark_attempt', ['attemptId', 'tick'])
export class RemarkEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @Column({ name: 'attempt_id', type: 'uuid' })
  attemptId!: string;

  @ManyToOne(() => AttemptEntity)
  @JoinColumn({ name: 'attempt_id', foreignKeyConstraintName: 'fk_remark_attempt' })
  attempt?: Relation<AttemptEntity>;

  @Column({ name: 'author_id', type: 'uuid' })
  authorId!: string;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'author_id', foreignKeyConstraintName: 'fk_remark_author' })
  author?: Relation<PersonEntity>;

  @Column({ type: 'int', unsigned: true })
  tick!: number;

  @Column({ type: 'text' })
  text!: string;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ name: 'withdrawn_at', type: 'datetime', precision: 3, nullable: true })
  withdrawnAt!: Date | null;
}
