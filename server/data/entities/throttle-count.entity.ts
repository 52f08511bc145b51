import { Column, Entity, PrimaryColumn } from 'typeorm';

/** Failures counted in a window of time, for limits that all processes share. */
@Entity('throttle_count')
export class ThrottleCountEntity {
  @PrimaryColumn({ name: 'throttle_key', type: 'varchar', length: 80 })
  key!: string;

  @PrimaryColumn({ name: 'window_start', type: 'datetime', precision: 3 })
  windowStart!: Date;

  @Column({ type: 'int', unsigned: true })
  count!: number;
}
