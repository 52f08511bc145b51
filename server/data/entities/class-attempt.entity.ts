import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AttemptEntity } from './attempt.entity.ts';
import { LiveClassEntity } from './live-class.entity.ts';

/** An attempt that was flown in a class. */
@Entity('class_attempt')
@Index('ux_class_attempt_run', ['classId', 'run', 'memberId'], { unique: true })
export class ClassAttemptEntity {
  @PrimaryColumn({ name: 'attempt_id', type: 'uuid' })
  attemptId!: string;

  @ManyToOne(() => AttemptEntity)
  @JoinColumn({ name: 'attempt_id', foreignKeyConstraintName: 'fk_class_attempt_attempt' })
  attempt?: Relation<AttemptEntity>;

  @Column({ name: 'class_id', type: 'uuid' })
  classId!: string;

  @ManyToOne(() => LiveClassEntity)
  @JoinColumn({ name: 'class_id', foreignKeyConstraintName: 'fk_class_attempt_class' })
  liveClass?: Relation<LiveClassEntity>;

  @Column({ type: 'int', unsigned: true })
  run!: number;

  @Column({ name: 'member_id', type: 'uuid' })
  memberId!: string;

  @Column({ type: 'boolean' })
  demonstration!: boolean;
}
