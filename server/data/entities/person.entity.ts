import { Column, Entity, Index, JoinColumn, ManyToOne, OneToMany, PrimaryColumn, type Relation } from 'typeorm';
import { OrganisationEntity } from './organisation.entity.ts';
import type { PersonRoleEntity } from './person-role.entity.ts';

@Entity('person')
@Index('ux_person_email_key', ['emailKey'], { unique: true })
@Index('ix_person_organisation_name', ['organisationId', 'displayName'])
export class PersonEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @ManyToOne(() => OrganisationEntity)
  @JoinColumn({ name: 'organisation_id', foreignKeyConstraintName: 'fk_person_organisation' })
  organisation?: Relation<OrganisationEntity>;

  /** As the person writes it. */
  @Column({ type: 'varchar', length: 254 })
  email!: string;

  /** Compatibility-normalised and lower-case: what sign-in compares; unique across organisations. */
  @Column({ name: 'email_key', type: 'varchar', length: 254 })
  emailKey!: string;

  @Column({ name: 'display_name', type: 'varchar', length: 120 })
  displayName!: string;

  @Column({ name: 'full_name', type: 'varchar', length: 200 })
  fullName!: string;

  /** Null until an invitation is taken up. */
  @Column({ name: 'password_hash', type: 'varchar', length: 60, nullable: true })
  passwordHash!: string | null;

  @Column({ type: 'enum', enum: ['invited', 'active', 'deactivated'] })
  status!: 'invited' | 'active' | 'deactivated';

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ name: 'deactivated_at', type: 'datetime', precision: 3, nullable: true })
  deactivatedAt!: Date | null;

  /** Named by its table: the two entities refer to each other and must not import each other. */
  /** Units the person prefers; null: those of the organisation. */
  @Column({ type: 'enum', enum: ['aviation', 'si'], nullable: true })
  units!: 'aviation' | 'si' | null;

  /** Zone in which the person reads times, by its name; null: that of the device. */
  @Column({ name: 'time_zone', type: 'varchar', length: 64, nullable: true })
  timeZone!: string | null;

  @OneToMany('person_role', 'person')
  roles?: Relation<PersonRoleEntity[]>;
}
