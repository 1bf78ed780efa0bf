import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';

/** Progress as a ribbon that fills a hairline, with a post at its end. */
@Component({
  selector: 'lw-ribbon-progress',
  template: `<span class="ribbon" [style.width.%]="shown()"></span>`,
  styles: `
    :host {
      background: linear-gradient(var(--lw-ribbon) 0 0) center / 100% 1px no-repeat;
      display: block;
      height: 16px;
      min-width: 40px;
      position: relative;
    }
    .ribbon {
      background: linear-gradient(var(--lw-ribbon) 0 0) center / 100% 10px no-repeat;
      border-right: 2px solid var(--lw-ribbon);
      display: block;
      height: 16px;
      transition: width 180ms var(--lw-ease);
    }
  `,
  host: {
    role: 'progressbar',
    'aria-valuemin': '0',
    'aria-valuemax': '100',
    '[attr.aria-valuenow]': 'shown()',
    '[attr.aria-label]': 'label()',
  },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class RibbonProgress {
  /** 0 to 100. */
  readonly percent = input.required<number>();
  readonly label = input.required<string>();
  protected readonly shown = computed(() => Math.round(Math.min(100, Math.max(0, this.percent()))));
}
