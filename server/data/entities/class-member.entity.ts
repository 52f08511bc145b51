import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { LiveClassEntity } from './live-class.entity.ts';
import { PersonEntity } from './person.entity.ts';

/** Who a member of a class is: a person of the organisation, or a guest with a name alone. Standing and seat are in the log. */
@Entity('class_member')
@Index('ux_class_member_person', ['classId', 'personId'], { unique: true })
export class ClassMemberEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'class_id', type: 'uuid' })
  classId!: string;

  @ManyToOne(() => LiveClassEntity)
  @JoinColumn({ name: 'class_id', foreignKeyConstraintName: 'fk_class_member_class' })
  liveClass?: Relation<LiveClassEntity>;

  /** Null for a guest. */
  @Column({ name: 'person_id', type: 'uuid', nullable: true })
  personId!: string | null;

  @ManyToOne(() => PersonEntity)
  @JoinColumn({ name: 'person_id', foreignKeyConstraintName: 'fk_class_member_person' })
  person?: Relation<PersonEntity>;

  @Column({ type: 'varchar', length: 120 })
  name!: string;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;
}
