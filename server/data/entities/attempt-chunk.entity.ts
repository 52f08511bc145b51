import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { AttemptEntity } from './attempt.entity.ts';

/** One acknowledged chunk of an input recording. Chunks of an attempt are contiguous from 0. */
@Entity('attempt_chunk')
export class AttemptChunkEntity {
  @PrimaryColumn({ name: 'attempt_id', type: 'uuid' })
  attemptId!: string;

  @PrimaryColumn({ name: 'chunk_index', type: 'int', unsigned: true })
  index!: number;

  @ManyToOne(() => AttemptEntity)
  @JoinColumn({ name: 'attempt_id', foreignKeyConstraintName: 'fk_attempt_chunk_attempt' })
  attempt?: Relation<AttemptEntity>;

  @Column({ name: 'start_tick', type: 'int', unsigned: true })
  startTick!: number;

  @Column({ name: 'tick_count', type: 'int', unsigned: true })
  tickCount!: number;

  /** Tick at which the next chunk starts: the end of this one, or where a rewind mark goes back to. */
  @Column({ name: 'next_tick', type: 'int', unsigned: true })
  nextTick!: number;

  /** Ticks flown up to the end of this chunk, rewound ones included. */
  @Column({ name: 'flown_ticks', type: 'int', unsigned: true })
  flownTicks!: number;

  @Column({ type: 'varchar', length: 16 })
  hash!: string;

  @Column({ type: 'mediumblob' })
  bytes!: Buffer;

  @Column({ name: 'received_at', type: 'datetime', precision: 3 })
  receivedAt!: Date;
}
