import * as z from 'zod';
import { definitionOf } from '../rules/definitions';
import type { Rulebook } from '../rules/rulebook';

const band = z
  .strictObject({ from: z.number(), to: z.number() })
  .refine(({ from, to }) => to >= from, 'the band ends below its begin');

const rule = z.strictObject({
  id: z.string().refine((id) => definitionOf(id) !== undefined, 'there is no such rule'),
  enabled: z.boolean().default(true),
  severity: z.enum(['blocking', 'warning', 'note']),
  decision: z.enum(['guarded', 'simple']).default('guarded'),
  limit: z.number().nullable().default(null),
  warningLimit: z.number().optional(),
  minimumCount: z.number().int().min(1).optional(),
  bands: z.strictObject({ receiver: band, driver: band }).optional(),
});

/** A rulebook as a document: JSON in a file, in the store, in an editor. */
export const rulebookSchema = z.strictObject({
  name: z.string().min(1).max(100),
  version: z.number().int().min(1),
  rules: z
    .array(rule)
    .max(200)
    .refine((rules) => new Set(rules.map(({ id }) => id)).size === rules.length, 'a rule stands twice'),
});

export type RulebookDocument = z.infer<typeof rulebookSchema>;

export function toRulebook(document: RulebookDocument): Rulebook {
  return {
    ...document,
    rules: document.rules.map(({ enabled, ...rule }) => ({ ...rule, isEnabled: enabled })),
  };
}

export function toRulebookDocument(rulebook: Rulebook): RulebookDocument {
  return {
    ...rulebook,
    rules: rulebook.rules.map(({ isEnabled, ...rule }) => ({ ...rule, enabled: isEnabled })),
  };
}
