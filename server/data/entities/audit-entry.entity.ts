import { Column, Entity, Index, PrimaryGeneratedColumn } from 'typeorm';

/** Who did what to which thing, when, from where. Append-only by trigger; no foreign keys, so that it outlives its subjects. */
@Entity('audit_entry')
@Index('ix_audit_entry_time', ['organisationId', 'at'])
@Index('ix_audit_entry_subject', ['organisationId', 'subjectKind', 'subjectId'])
export class AuditEntryEntity {
  /** Order of writing; never shown in an address. */
  @PrimaryGeneratedColumn({ type: 'bigint', unsigned: true })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid', nullable: true })
  organisationId!: string | null;

  @Column({ type: 'datetime', precision: 3 })
  at!: Date;

  /** Null for what the program did by itself. */
  @Column({ name: 'actor_id', type: 'uuid', nullable: true })
  actorId!: string | null;

  @Column({ type: 'varchar', length: 60 })
  deed!: string;

  @Column({ name: 'subject_kind', type: 'varchar', length: 40 })
  subjectKind!: string;

  @Column({ name: 'subject_id', type: 'varchar', length: 80, nullable: true })
  subjectId!: string | null;

  @Column({ type: 'json' })
  detail!: unknown;

  @Column({ type: 'varchar', length: 45, nullable: true })
  address!: string | null;
}
