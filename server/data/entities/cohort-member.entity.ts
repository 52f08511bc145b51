import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { CohortEntity } from './cohort.entity.ts';
import { PersonEntity } from './person.entity.ts';

@Entity('cohort_member')
@Index('ix_cohort_member_person', ['personId'])
export class CohortMemberEntity {
  @PrimaryColumn({ name: 'cohort_id', type: 'uuid' })
  cohortId!: string;

  @PrimaryColumn({ name: 'person_id', type: 'uuid' })
  personId!: string;

  @ManyToOne(() => CohortEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'cohort_id', foreignKeyConstraintName: 'fk_cohort_member_cohort' })
  cohort?: Relation<CohortEntity>;

  @ManyToOne(() => PersonEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'person_id', foreignKeyConstraintName: 'fk_cohort_member_person' })
  person?: Relation<PersonEntity>;

  @Column({ name: 'joined_at', type: 'datetime', precision: 3 })
  joinedAt!: Date;
}
