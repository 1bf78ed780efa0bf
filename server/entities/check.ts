import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryGeneratedColumn, type Relation } from 'typeorm';
import type { CheckSummary, FindingView } from '#shared/contract/http/checks';
import type { DecodeSummary } from '#shared/contract/http/decodes';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import type { OverallVerdict, RuleResult } from '#shared/rules/finding';
import { Decode } from './decode';

/** What lists show of a check. */
export interface CheckFigures extends Pick<CheckSummary, 'counts' | 'worst'> {
  readonly marks: DecodeSummary['marks'];
}

/** All verdicts and findings of a check. */
export interface CheckDetail {
  readonly rules: readonly RuleResult[];
  readonly findings: readonly FindingView[];
}

/** Decode × rulebook → verdicts and findings. Immutable. Result and log lie in a folder beside the database. */
@Entity('check_result')
export class Check {
  @PrimaryGeneratedColumn({ type: 'integer' })
  id!: number;

  @Index()
  @Column({ type: 'integer' })
  decodeId!: number;

  @ManyToOne(() => Decode, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'decodeId' })
  decode!: Relation<Decode>;

  @Column({ type: 'text' })
  rulebook!: RulebookKey;

  @Column({ type: 'text' })
  rulebookName!: string;

  @Column({ type: 'integer' })
  rulebookVersion!: number;

  @Column({ type: 'text' })
  verdict!: OverallVerdict;

  @Column({ type: 'simple-json' })
  figures!: CheckFigures;

  /** Long: read only where one check is shown. */
  @Column({ type: 'simple-json', select: false })
  detail!: CheckDetail;

  @Column({ type: 'text' })
  folder!: string;

  @Column({ type: 'integer' })
  createdAt!: number;
}
