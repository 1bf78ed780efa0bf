import * as z from 'zod';
import {
  basisSchema,
  overallVerdictSchema,
  rulebookKeySchema,
  severitySchema,
  verdictSchema,
} from './rulebooks';

export const newCheckSchema = z.strictObject({ rulebook: rulebookKeySchema });
export type NewCheck = z.infer<typeof newCheckSchema>;

/** Rules by verdict. */
export const verdictCountsSchema = z.object({
  violation: z.number().int(),
  inconclusive: z.number().int(),
  pass: z.number().int(),
  notShown: z.number().int(),
  notApplicable: z.number().int(),
});
export type VerdictCounts = z.infer<typeof verdictCountsSchema>;

/** One place where a rule was judged. */
export const findingSchema = z.object({
  rule: z.string(),
  verdict: verdictSchema.exclude(['not-applicable']),
  severity: severitySchema,
  /** Ticks of the tape's time base. */
  startTicks: z.number(),
  endTicks: z.number(),
  /** Seconds of the file's own clock. */
  startS: z.number(),
  endS: z.number(),
  measured: z.number().nullable(),
  uncertainty: z.number().nullable(),
  uncertaintyKind: z.enum(['bound', 'k2']).nullable(),
  limit: z.number().nullable(),
  unit: z.string().nullable(),
  message: z.string(),
});
export type FindingView = z.infer<typeof findingSchema>;

/** The verdict of one rule, with what the rule is. */
export const ruleResultSchema = z.object({
  id: z.string(),
  name: z.string(),
  quantity: z.string(),
  sense: z.enum(['at-most', 'at-least', 'none']),
  basis: basisSchema,
  source: z.string(),
  needs: z.string(),
  isMeasured: z.boolean(),
  verdict: verdictSchema,
  severity: severitySchema,
  /** Places judged. */
  n: z.number().int(),
  measured: z.number().nullable(),
  uncertainty: z.number().nullable(),
  uncertaintyKind: z.enum(['bound', 'k2']).nullable(),
  limit: z.number().nullable(),
  unit: z.string().nullable(),
  reason: z.string(),
});
export type RuleResultView = z.infer<typeof ruleResultSchema>;

/** A check at a glance. `counts` counts rules, `worst` holds up to three findings, blocking violations first. */
export const checkSummarySchema = z.object({
  id: z.number().int(),
  decodeId: z.number().int(),
  rulebook: z.object({ key: rulebookKeySchema, name: z.string(), version: z.number().int() }),
  verdict: overallVerdictSchema,
  counts: verdictCountsSchema,
  worst: z.array(findingSchema),
  createdAt: z.string(),
});
export type CheckSummary = z.infer<typeof checkSummarySchema>;

export const checkSchema = checkSummarySchema.extend({
  capture: z.string(),
  rules: z.array(ruleResultSchema),
  findings: z.array(findingSchema),
});
export type CheckView = z.infer<typeof checkSchema>;

/** `from`: id of the check to compare with; the check before this one of the same capture if left out. */
export const changesQuerySchema = z.object({ from: z.coerce.number().int().positive().optional() });
export type ChangesQuery = z.input<typeof changesQuerySchema>;

const side = ruleResultSchema.pick({
  verdict: true,
  severity: true,
  n: true,
  measured: true,
  uncertainty: true,
  limit: true,
  unit: true,
});

/** What changed between two checks. `from` is null where there is none to compare with; then the lists are empty. */
export const checkChangesSchema = z.object({
  from: checkSummarySchema.nullable(),
  to: checkSummarySchema,
  /** Rules whose verdict, severity or limit differ. */
  rules: z.array(
    z.object({
      id: z.string(),
      name: z.string(),
      /** `worse`: nearer to a violation than before; `same`: only limit or severity differ. */
      direction: z.enum(['better', 'worse', 'same']),
      from: side,
      to: side,
    }),
  ),
  appeared: z.array(findingSchema),
  disappeared: z.array(findingSchema),
  /** Findings that stand in both. */
  kept: z.number().int(),
});
export type CheckChanges = z.infer<typeof checkChangesSchema>;
