import { inject, Injectable } from '@angular/core';
import { Notices } from '../ui/notices';
import { readOutText } from './drawing/read-out';
import { EDGES_PX, HANDSHAKE_PX, TapeStage } from './tape-stage';

/** What keys lead to that is not the stage's. */
export interface KeyTarget {
  openFind(): void;
  showTab(name: 'Packets' | 'Motion'): void;
  copyLink(): void;
  openDetails(): void;
}

/** The keys of the tape. They work while the tape has the focus. Source: design 13. */
@Injectable()
export class TapeKeys {
  private readonly stage = inject(TapeStage);
  private readonly notices = inject(Notices);

  /** @returns whether the key was taken */
  press(event: KeyboardEvent, target: KeyTarget): boolean {
    if (event.ctrlKey || event.metaKey) {
      if (event.key === 'c' && this.hasDivider()) {
        this.copyReadOut();
        return true;
      }
      return false;
    }
    const act = this.actionOf(event, target);
    if (act === undefined) return false;
    act();
    return true;
  }

  private actionOf(event: KeyboardEvent, target: KeyTarget): (() => void) | undefined {
    const { stage } = this;
    switch (event.key) {
      case 'ArrowLeft':
      case 'ArrowRight': {
        const direction = event.key === 'ArrowRight' ? 1 : -1;
        if (stage.activeDivider() !== null)
          return () => stage.stepDivider(direction, event.altKey ? 'sample' : 'edge');
        return () => stage.pan(direction * (event.shiftKey ? 1 : 0.1));
      }
      case '+':
      case '=':
        return () => stage.zoomStep(1);
      case '-':
      case '−':
        return () => stage.zoomStep(-1);
      case '0':
        return () => stage.showAll();
      case 'Home':
        return () => this.toBegin();
      case 'End':
        return () => this.toEnd();
      case 'h':
        return () => this.handshake();
      case 'r':
        return () => stage.isStacked.update((is) => !is);
      case 'e':
        return () => stage.showAtScale(EDGES_PX, stage.focusTicks());
      case 'n':
        return () => stage.stepFinding(1);
      case 'p':
        return () => stage.stepFinding(-1);
      case ',':
        return () => stage.stepThing('packet', -1);
      case '.':
        return () => stage.stepThing('packet', 1);
      case '[':
        return () => stage.stepThing('character', -1);
      case ']':
        return () => stage.stepThing('character', 1);
      case 'i':
        return () => this.inspect();
      case 'g':
      case '/':
        return () => target.openFind();
      case 'a':
      case 'b': {
        const name = event.key;
        return () => stage.setDivider(name, stage.focusTicks());
      }
      case 'x':
        return () => stage.swapDividers();
      case 'm':
        return () => target.showTab('Motion');
      case 't':
        return () => target.showTab('Packets');
      case 'c':
        return () => target.copyLink();
      case 'Enter':
        return () => target.openDetails();
      case 'Escape':
        return this.escape();
      default:
        return undefined;
    }
  }

  /** To the first answered reset, else the first. */
  handshake(): void {
    const model = this.stage.model();
    if (model === null || model.tape.resets.length === 0) return;
    const { resets } = model.tape;
    const focus = this.stage.focusTicks();
    const next = resets.findIndex(({ onTicks, replyTicks }) => replyTicks !== null && onTicks > focus);
    const selection = this.stage.selection();
    const first = Math.max(
      0,
      resets.findIndex(({ replyTicks }) => replyTicks !== null),
    );
    // Pressed again, it goes on to the next one.
    const index = selection?.kind === 'reset' && next >= 0 ? next : first;
    this.stage.isStacked.set(false);
    this.stage.select({ kind: 'reset', index });
    this.stage.showFrom(HANDSHAKE_PX, resets[index].onTicks);
  }

  /** The first character of what is selected, or the next one, under the glass. */
  private inspect(): void {
    const { stage } = this;
    const model = stage.model();
    const selection = stage.selection();
    if (model === null || selection?.kind === 'character') return;
    if (selection?.kind === 'packet')
      stage.reveal({ kind: 'character', index: model.tape.packets.firstCharacter[selection.index] });
    else stage.stepThing('character', 1);
  }

  private toBegin(): void {
    const { startTicks, endTicks } = this.stage.window();
    this.stage.moveTo({ startTicks: 0, endTicks: endTicks - startTicks });
  }

  private toEnd(): void {
    const model = this.stage.model();
    if (model === null) return;
    const { startTicks, endTicks } = this.stage.window();
    this.stage.moveTo({
      startTicks: model.tape.endTicks - (endTicks - startTicks),
      endTicks: model.tape.endTicks,
    });
  }

  private escape(): (() => void) | undefined {
    const { stage } = this;
    const { a, b } = stage.dividers();
    if (stage.isStacked()) return () => stage.isStacked.set(false);
    if (stage.activeDivider() !== null) return () => stage.releaseDivider();
    if (a !== null || b !== null) return () => stage.clearDividers();
    return stage.selection() === null ? undefined : () => stage.select(null);
  }

  private hasDivider(): boolean {
    const { a, b } = this.stage.dividers();
    return a !== null || b !== null;
  }

  private copyReadOut(): void {
    const readOut = this.stage.readOut();
    if (readOut === null) return;
    void navigator.clipboard.writeText(readOutText(readOut)).then(() => this.notices.say('Read-out copied'));
  }
}
