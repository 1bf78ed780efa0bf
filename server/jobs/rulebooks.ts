import type { RulebookKey, RulebookSummary, RulebookView } from '#shared/contract/http/rulebooks';
import { RULEBOOK_KEYS } from '#shared/contract/http/rulebooks';
import { BASELINE } from '#shared/rules/baseline';
import { RULE_DEFINITIONS } from '#shared/rules/definitions';
import { HOST_LIMITS } from '#shared/rules/host-limits';
import type { Rulebook } from '#shared/rules/rulebook';
import { NotFound } from '../services/service-error';

/** The rulebooks that ship with the product. */
export const RULEBOOKS: Readonly<Record<RulebookKey, Rulebook>> = {
  baseline: BASELINE,
  'host-limits': HOST_LIMITS,
};

const DESCRIPTIONS: Readonly<Record<RulebookKey, string>> = {
  baseline: 'What common practice expects of a device.',
  'host-limits': 'What published hosts need, where it differs from common practice.',
};

export function listRulebooks(): RulebookSummary[] {
  return RULEBOOK_KEYS.map(toSummary);
}

/** A rulebook with every rule of the product, also those it does not set. @throws NotFound where there is none of this key */
export function viewRulebook(wanted: string): RulebookView {
  const key = RULEBOOK_KEYS.find((one) => one === wanted);
  if (key === undefined) throw new NotFound('This rulebook');
  const settings = new Map(RULEBOOKS[key].rules.map((setting) => [setting.id, setting]));
  const rules = RULE_DEFINITIONS.map((definition) => {
    const setting = settings.get(definition.id);
    const { id, name, quantity, unit, sense, basis, source, needs, isMeasured } = definition;
    return {
      id,
      name,
      quantity,
      unit,
      sense,
      basis,
      source,
      needs,
      isMeasured,
      isEnabled: setting?.isEnabled ?? false,
      severity: setting?.severity ?? 'note',
      decision: setting?.decision ?? 'guarded',
      limit: setting?.limit ?? null,
      warningLimit: setting?.warningLimit ?? null,
      minimumCount: setting?.minimumCount ?? null,
    };
  });
  return { ...toSummary(key), rules };
}

function toSummary(key: RulebookKey): RulebookSummary {
  const { name, version } = RULEBOOKS[key];
  return { key, name, version, description: DESCRIPTIONS[key] };
}
