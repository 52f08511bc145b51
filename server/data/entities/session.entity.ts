import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { PersonEntity } from './person.entity.ts';

/** One signed-in browser: the family of all refresh tokens descended from one sign-in. */
@Entity('session')
@Index('ix_session_person', ['personId', 'revokedAt'])
export class SessionEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'person_id', type: 'uuid' })
  personId!: string;

  @ManyToOne(() => PersonEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'person_id', foreignKeyConstraintName: 'fk_session_person' })
  person?: Relation<PersonEntity>;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  @Column({ name: 'last_used_at', type: 'datetime', precision: 3 })
  lastUsedAt!: Date;

  /** End of the whole family, however often it is refreshed. */
  @Column({ name: 'expires_at', type: 'datetime', precision: 3 })
  expiresAt!: Date;

  @Column({ name: 'revoked_at', type: 'datetime', precision: 3, nullable: true })
  revokedAt!: Date | null;

  @Column({ name: 'revoked_for', type: 'varchar', length: 40, nullable: true })
  revokedFor!: string | null;

  @Column({ type: 'varchar', length: 45, nullable: true })
  address!: string | null;

  @Column({ type: 'varchar', length: 255, nullable: true })
  agent!: string | null;
}
