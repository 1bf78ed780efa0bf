import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { Icon } from '../ui/icon';
import { Notices } from '../ui/notices';
import { VerdictGlyph } from '../ui/verdict-glyph';
import { ClosesByItself } from './closes-by-itself';

@Component({
  selector: 'lw-notice-list',
  template: `
    <div class="list" role="status" aria-live="polite">
      @for (notice of notices.list(); track notice.id) {
        <div class="notice" [lwClosesByItself]="notice.kind !== 'failed'" (timeUp)="notices.close(notice.id)">
          @if (notice.kind !== 'said') {
            <lw-verdict-glyph [kind]="notice.kind === 'failed' ? 'violation' : 'pass'" />
          }
          <span>{{ notice.text }}</span>
          @if (notice.action; as action) {
            <button type="button" class="text-button" (click)="action.run(); notices.close(notice.id)">
              {{ action.label }}
            </button>
          }
          <button
            type="button"
            class="icon-button"
            aria-label="Close this notice"
            (click)="notices.close(notice.id)"
          >
            <lw-icon name="close" />
          </button>
        </div>
      }
    </div>
  `,
  styleUrl: './notice-list.scss',
  imports: [ClosesByItself, Icon, VerdictGlyph],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NoticeList {
  protected readonly notices = inject(Notices);
}
