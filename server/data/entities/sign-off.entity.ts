import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AttemptEntity } from './attempt.entity.ts';
import { PersonEntity } from './person.entity.ts';

/** A signature under an attempt. Append-only by trigger: a correction is a later entry. */
@Entity('sign_off')
@Index('ix_sign_off_attempt', ['attemptId', 'createdAt'])
export class SignOffEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @Column({ name: 'attempt_id', type: 'uuid' })
  attemptId!: string;

  @ManyToOne(() => AttemptEntity)
  @JoinColumn({ name: 'attempt_id', foreignKeyConstraintName: 'fk_sign_off_attempt' })
  attempt?: Relation<AttemptEntity>;

  @Column({ name: 'signer_id', type: 'uuid' })
  signerId!: string;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'signer_id', foreignKeyConstraintName: 'fk_sign_off_signer' })
  signer?: Relation<PersonEntity>;

  @Column({ type: 'enum', enum: ['sign-off', 'counter-signature'] })
  kind!: 'sign-off' | 'counter-signature';

  @Column({ type: 'enum', enum: ['met', 'not-met'] })
  verdict!: 'met' | 'not-met';

  @Column({ type: 'text' })
  note!: string;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;
}
