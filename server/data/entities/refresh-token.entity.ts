import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { SessionEntity } from './session.entity.ts';

/** Only the hash is kept. A token is used once; its use makes the next one. */
@Entity('refresh_token')
@Index('ix_refresh_token_session', ['sessionId'])
export class RefreshTokenEntity {
  @PrimaryColumn({ name: 'token_hash', type: 'varchar', length: 64 })
  tokenHash!: string;

  @Column({ name: 'session_id', type: 'uuid' })
  sessionId!: string;

  @ManyToOne(() => SessionEntity, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'session_id', foreignKeyConstraintName: 'fk_refresh_token_session' })
  session?: Relation<SessionEntity>;

  @Column({ name: 'issued_at', type: 'datetime', precision: 3 })
  issuedAt!: Date;

  @Column({ name: 'used_at', type: 'datetime', precision: 3, nullable: true })
  usedAt!: Date | null;
}
