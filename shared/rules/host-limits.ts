import { BASELINE } from './baseline';
import type { Rulebook } from './rulebook';

/** Latency with which the first 7N1 character ends within 100 ms of RTS ON. Source: rules.md 2, HSK-1. */
const LATEST_START_MS = 92.5;

/** What published hosts need, where it differs from common practice of devices. */
export const HOST_LIMITS: Rulebook = {
  name: 'Host limits',
  version: 1,
  rules: BASELINE.rules.map((rule) =>
    rule.id === 'HSK-1' || rule.id === 'HSK-8' ? { ...rule, limit: LATEST_START_MS } : rule,
  ),
};
