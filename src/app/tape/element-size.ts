import type { Signal } from '@angular/core';
import { DestroyRef, ElementRef, inject, signal } from '@angular/core';

export interface Size {
  readonly widthPx: number;
  readonly heightPx: number;
}

/** Size of the host element's content, in CSS px. Call in an injection context. */
export function hostSize(): Signal<Size> {
  const element: HTMLElement = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  const size = signal<Size>({ widthPx: element.clientWidth, heightPx: element.clientHeight });
  const observer = new ResizeObserver(() =>
    size.set({ widthPx: element.clientWidth, heightPx: element.clientHeight }),
  );
  observer.observe(element);
  inject(DestroyRef).onDestroy(() => observer.disconnect());
  return size.asReadonly();
}
