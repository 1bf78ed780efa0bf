/** One call on a canvas, with the state that decides how it looks. */
export interface RecordedCall {
  readonly name: string;
  readonly args: readonly unknown[];
  readonly fillStyle: string;
  readonly strokeStyle: string;
  readonly alpha: number;
  readonly font: string;
  readonly dash: readonly number[];
}

/** A text as it was set. */
export interface RecordedText {
  readonly text: string;
  readonly x: number;
  readonly y: number;
  readonly colour: string;
  readonly font: string;
}

interface State {
  fillStyle: string;
  strokeStyle: string;
  globalAlpha: number;
  font: string;
  lineDash: number[];
}

class RecordedPath {
  constructor(readonly data: string) {}
}

/** A canvas context that draws nothing and writes down every call, for painters under test. */
export class RecordingContext {
  readonly calls: RecordedCall[] = [];
  readonly ctx: CanvasRenderingContext2D;
  private state: State = {
    fillStyle: '#000000',
    strokeStyle: '#000000',
    globalAlpha: 1,
    font: '10px sans-serif',
    lineDash: [],
  };
  private readonly saved: State[] = [];

  constructor(ratio = 1) {
    const scope = globalThis as { Path2D?: unknown };
    scope.Path2D ??= RecordedPath;
    this.ctx = new Proxy({} as CanvasRenderingContext2D, {
      get: (_, name) => this.read(String(name), ratio),
      set: (_, name, value) => {
        (this.state as unknown as Record<string, unknown>)[String(name)] = value;
        return true;
      },
    });
  }

  private read(name: string, ratio: number): unknown {
    if (name === 'getTransform') return () => ({ a: ratio, b: 0, c: 0, d: ratio, e: 0, f: 0 });
    if (name in this.state) return this.state[name as keyof State];
    return (...args: unknown[]): void => this.record(name, args);
  }

  private record(name: string, args: unknown[]): void {
    if (name === 'save') this.saved.push({ ...this.state });
    if (name === 'restore') this.state = this.saved.pop() ?? this.state;
    if (name === 'setLineDash') this.state.lineDash = args[0] as number[];
    const { fillStyle, strokeStyle, globalAlpha, font, lineDash } = this.state;
    this.calls.push({ name, args, fillStyle, strokeStyle, alpha: globalAlpha, font, dash: lineDash });
  }

  /** Calls of one kind. */
  of(name: string): RecordedCall[] {
    return this.calls.filter((call) => call.name === name);
  }

  texts(): RecordedText[] {
    return this.of('fillText').map(({ args, fillStyle, font }) => ({
      text: args[0] as string,
      x: args[1] as number,
      y: args[2] as number,
      colour: fillStyle,
      font,
    }));
  }

  /** All texts joined, for "does it say so". */
  saying(): string {
    return this.texts()
      .map((text) => text.text)
      .join(' | ');
  }

  /** Filled rectangles of a colour: [x, y, width, height]. */
  rects(colour: string): [number, number, number, number][] {
    return this.of('fillRect')
      .filter((call) => call.fillStyle === colour)
      .map((call) => call.args as [number, number, number, number]);
  }

  /** Glyphs and other stored paths by the data they were made of, with their colour. */
  paths(): { data: string; colour: string }[] {
    return this.calls
      .filter((call) => (call.name === 'fill' || call.name === 'stroke') && call.args.length > 0)
      .map((call) => ({
        data: (call.args[0] as RecordedPath).data,
        colour: call.name === 'fill' ? call.fillStyle : call.strokeStyle,
      }));
  }
}
