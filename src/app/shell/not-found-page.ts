import { ChangeDetectionStrategy, Component } from '@angular/core';
import { RouterLink } from '@angular/router';
import { TitleBlock } from '../ui/title-block';

@Component({
  selector: 'lw-not-found-page',
  template: `
    <div class="screen">
      <lw-title-block heading="Not found" data-region />
      <div class="main">
        <p class="empty">
          <strong>Nothing stands at this address.</strong>
          It may have been deleted, or the address has a slip.
          <a routerLink="/captures">Back to the captures</a>
        </p>
      </div>
    </div>
  `,
  imports: [RouterLink, TitleBlock],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NotFoundPage {}
