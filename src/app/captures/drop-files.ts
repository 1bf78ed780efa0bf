import { Directive, output, signal } from '@angular/core';

/** Takes files that are dropped anywhere on the element. */
@Directive({
  selector: '[lwDropFiles]',
  host: {
    '[class.dropping]': 'isOver()',
    '(dragover)': 'over($event)',
    '(dragleave)': 'leave($event)',
    '(drop)': 'drop($event)',
  },
})
export class DropFiles {
  readonly lwDropFiles = output<readonly File[]>();
  protected readonly isOver = signal(false);

  protected over(event: DragEvent): void {
    if (!event.dataTransfer?.types.includes('Files')) return;
    event.preventDefault();
    this.isOver.set(true);
  }

  protected leave(event: DragEvent): void {
    const host = event.currentTarget as HTMLElement;
    if (!host.contains(event.relatedTarget as Node | null)) this.isOver.set(false);
  }

  protected drop(event: DragEvent): void {
    event.preventDefault();
    this.isOver.set(false);
    const files = [...(event.dataTransfer?.files ?? [])];
    if (files.length > 0) this.lwDropFiles.emit(files);
  }
}
