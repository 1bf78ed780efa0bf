import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/** One ruled cell of a title block; left out on narrow windows unless `keep` is set. */
@Component({
  selector: 'lw-title-cell',
  template: `<span class="label">{{ label() }}</span> <span class="value"><ng-content /></span>`,
  styles: `
    :host {
      border-left: 1px solid var(--lw-rule);
      display: flex;
      flex: none;
      flex-direction: column;
      gap: 2px;
      justify-content: center;
      padding: 0 16px;
    }
    .label {
      color: var(--lw-ink-2);
      font-size: 12px;
      line-height: 16px;
      white-space: nowrap;
    }
    .value {
      align-items: center;
      display: flex;
      gap: 10px;
      min-height: 20px;
      white-space: nowrap;
    }
    @media (max-width: 1199.98px) {
      :host(:not(.keep)) {
        display: none;
      }
    }
    @media (max-width: 899.98px) {
      :host {
        display: none;
      }
    }
  `,
  host: { '[class.keep]': 'keep()' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TitleCell {
  readonly label = input.required<string>();
  readonly keep = input(false);
}
