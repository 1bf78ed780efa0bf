import { Column, Entity, OneToMany, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import { Build } from './build';

/** A product under test. */
@Entity('device')
export class Device {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Column({ type: 'text', unique: true })
  name!: string;

  @Column({ type: 'text' })
  kind!: string;

  @Column({ type: 'text' })
  maker!: string;

  @Column({ type: 'real', nullable: true })
  countsPerInch!: number | null;

  @Column({ type: 'text', nullable: true })
  protocol!: string | null;

  @Column({ type: 'text' })
  notes!: string;

  @Column({ type: 'integer' })
  createdAt!: number;

  @OneToMany(() => Build, (build) => build.device)
  builds!: Relation<Build[]>;
}
