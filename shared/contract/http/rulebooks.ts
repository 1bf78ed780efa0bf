import * as z from 'zod';

/** Rulebooks that ship with the product. */
export const RULEBOOK_KEYS = ['baseline', 'host-limits'] as const;
export const rulebookKeySchema = z.enum(RULEBOOK_KEYS);
export type RulebookKey = z.infer<typeof rulebookKeySchema>;

export const basisSchema = z.enum(['std', 'ref', 'cp', 'house']);
export const severitySchema = z.enum(['blocking', 'warning', 'note']);
export const verdictSchema = z.enum(['pass', 'violation', 'inconclusive', 'not-shown', 'not-applicable']);
export const overallVerdictSchema = z.enum(['pass', 'fail', 'inconclusive']);

/** A rule: what is measured, where the limit comes from, and how one rulebook sets it. */
export const rulebookRuleSchema = z.object({
  id: z.string(),
  name: z.string(),
  quantity: z.string(),
  unit: z.string().nullable(),
  sense: z.enum(['at-most', 'at-least', 'none']),
  basis: basisSchema,
  source: z.string(),
  /** What a capture must hold. */
  needs: z.string(),
  isMeasured: z.boolean(),
  isEnabled: z.boolean(),
  severity: severitySchema,
  decision: z.enum(['guarded', 'simple']),
  limit: z.number().nullable(),
  warningLimit: z.number().nullable(),
  minimumCount: z.number().nullable(),
});
export type RulebookRule = z.infer<typeof rulebookRuleSchema>;

export const rulebookSummarySchema = z.object({
  key: rulebookKeySchema,
  name: z.string(),
  version: z.number().int(),
  description: z.string(),
});
export type RulebookSummary = z.infer<typeof rulebookSummarySchema>;

export const rulebookViewSchema = rulebookSummarySchema.extend({ rules: z.array(rulebookRuleSchema) });
export type RulebookView = z.infer<typeof rulebookViewSchema>;
