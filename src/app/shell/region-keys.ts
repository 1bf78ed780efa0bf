import { Directive, ElementRef, inject } from '@angular/core';

const REGIONS = '[data-region]';

/** F6 and Shift F6 walk through the regions of the screen: spine, title block, main, lower pane, drawer. */
@Directive({
  selector: '[lwRegionKeys]',
  host: { '(keydown.f6)': 'go($event, 1)', '(keydown.shift.f6)': 'go($event, -1)' },
})
export class RegionKeys {
  private readonly root: HTMLElement = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;

  protected go(event: Event, step: 1 | -1): void {
    event.preventDefault();
    const regions = [...this.root.querySelectorAll<HTMLElement>(REGIONS)].filter(
      (region) => region.offsetParent !== null || region.getClientRects().length > 0,
    );
    if (regions.length === 0) return;
    const at = regions.findIndex((region) => region.contains(document.activeElement));
    const next = regions[(at + step + regions.length) % regions.length];
    const target = next.querySelector<HTMLElement>('[tabindex="0"], button, a[href], input, select') ?? next;
    if (target === next) next.tabIndex = -1;
    target.focus();
  }
}
