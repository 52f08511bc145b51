import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { OrganisationEntity } from './organisation.entity.ts';
import { PersonEntity } from './person.entity.ts';

/** A class. What happens in it is in its log; here stands what is looked up: who may join with which code, and the last entry. */
@Entity('live_class')
@Index('ux_live_class_join_code', ['joinCode'], { unique: true })
@Index('ux_live_class_open_key', ['instructorId', 'openKey'], { unique: true })
@Index('ix_live_class_opened', ['organisationId', 'openedAt'])
export class LiveClassEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @ManyToOne(() => OrganisationEntity)
  @JoinColumn({ name: 'organisation_id', foreignKeyConstraintName: 'fk_live_class_organisation' })
  organisation?: Relation<OrganisationEntity>;

  @Column({ name: 'instructor_id', type: 'uuid' })
  instructorId!: string;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'instructor_id', foreignKeyConstraintName: 'fk_live_class_instructor' })
  instructor?: Relation<PersonEntity>;

  @Column({ type: 'varchar', length: 120 })
  title!: string;

  /** Null once the class has ended: the code expires with it. */
  @Column({ name: 'join_code', type: 'varchar', length: 6, nullable: true })
  joinCode!: string | null;

  @Column({ type: 'boolean' })
  guests!: boolean;

  @Column({ name: 'open_key', type: 'uuid', nullable: true })
  openKey!: string | null;

  /** Number of the last entry of the log; its row is locked while one is appended. */
  @Column({ name: 'last_seq', type: 'int', unsigned: true })
  lastSeq!: number;

  /** Frames and events that were refused. */
  @Column({ type: 'int', unsigned: true })
  refused!: number;

  @Column({ name: 'opened_at', type: 'datetime', precision: 3 })
  openedAt!: Date;

  @Column({ name: 'ended_at', type: 'datetime', precision: 3, nullable: true })
  endedAt!: Date | null;
}
