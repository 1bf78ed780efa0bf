import { ChangeDetectionStrategy, Component, input } from '@angular/core';

/**
 * The ruled band at the top of a screen. Cells: `<lw-title-cell label>`; the last slot, `[actions]`, takes at most two buttons;
 * `[path]` the way that leads here.
 */
@Component({
  selector: 'lw-title-block',
  template: `
    <header>
      <div class="first">
        <div class="path"><ng-content select="[path]" /></div>
        <h1 class="cut" tabindex="-1">{{ heading() }}</h1>
      </div>
      <ng-content select="lw-title-cell" />
      <div class="actions"><ng-content select="[actions]" /></div>
    </header>
    <ng-content />
  `,
  styleUrl: './title-block.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TitleBlock {
  readonly heading = input.required<string>();
}
