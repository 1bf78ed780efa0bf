import { ChangeDetectionStrategy, Component, output } from '@angular/core';
import { Icon } from '../ui/icon';
import { VerdictGlyph } from '../ui/verdict-glyph';

/** How to read the tape: shown on a person's first tape, comes back from the lane bar. */
@Component({
  selector: 'lw-legend',
  templateUrl: './legend.html',
  styleUrl: './legend.scss',
  imports: [Icon, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class Legend {
  readonly closed = output();
}
