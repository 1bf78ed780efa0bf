import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { IconName } from './icon-paths';
import { ICON_PATHS } from './icon-paths';

/** An interface icon; says nothing to a screen reader, its control carries the name. */
@Component({
  selector: 'lw-icon',
  template: `<svg viewBox="0 -960 960 960" aria-hidden="true"><path [attr.d]="path()" /></svg>`,
  styles: `
    :host {
      display: inline-flex;
      flex: none;
      height: 20px;
      width: 20px;
    }
    svg {
      fill: currentcolor;
      height: 100%;
      width: 100%;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Icon {
  readonly name = input.required<IconName>();
  protected readonly path = computed(() => ICON_PATHS[this.name()]);
}
