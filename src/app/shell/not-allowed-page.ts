import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { RouterLink } from '@angular/router';
import { Session } from '../account/session';
import { TitleBlock } from '../ui/title-block';

@Component({
  selector: 'lw-not-allowed-page',
  template: `
    <div class="screen">
      <lw-title-block heading="Not allowed" data-region />
      <div class="main">
        <p class="empty">
          <strong>Your role, {{ account()?.role }}, cannot open this.</strong>
          {{ whoCan() }} <a routerLink="/captures">Back to the captures</a>
        </p>
      </div>
    </div>
  `,
  imports: [RouterLink, TitleBlock],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class NotAllowedPage {
  /** Roles that may, joined by commas. */
  readonly needs = input<string>();
  protected readonly account = inject(Session).account;
  protected readonly whoCan = computed(() => {
    const roles = this.needs();
    return roles === undefined ? '' : `It takes the role ${roles.split(',').join(' or ')}.`;
  });
}
