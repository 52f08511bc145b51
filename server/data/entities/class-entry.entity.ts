import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { LiveClassEntity } from './live-class.entity.ts';

/** One entry of a class's log. Triggers allow nothing but adding. */
@Entity('class_entry')
@Index('ux_class_entry_deed', ['classId', 'deedKey'], { unique: true })
export class ClassEntryEntity {
  @PrimaryColumn({ name: 'class_id', type: 'uuid' })
  classId!: string;

  @PrimaryColumn({ type: 'int', unsigned: true })
  seq!: number;

  @ManyToOne(() => LiveClassEntity)
  @JoinColumn({ name: 'class_id', foreignKeyConstraintName: 'fk_class_entry_class' })
  liveClass?: Relation<LiveClassEntity>;

  @Column({ type: 'datetime', precision: 3 })
  at!: Date;

  @Column({ type: 'varchar', length: 20 })
  kind!: string;

  /** Member; null for the server. */
  @Column({ name: 'by_member', type: 'uuid', nullable: true })
  byMember!: string | null;

  /** Made by the client once per press, on the first entry that the press led to. */
  @Column({ name: 'deed_key', type: 'uuid', nullable: true })
  deedKey!: string | null;

  /** The whole entry as shared/scenario/class-log.ts has it. */
  @Column({ type: 'json' })
  body!: unknown;
}
