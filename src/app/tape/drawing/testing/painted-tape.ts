import { layOutLanes } from '../lanes';
import { paintData, paintOverlay, paintPaper } from '../paint-tape';
import type { TapeModel } from '../tape-model';
import type { TapeView } from '../view';
import { NAMED_PALETTE } from './composed-tape';
import { RecordingContext } from './recording-context';

/** The three layers of a tape as recorded calls. */
export interface PaintedTape {
  readonly paper: RecordingContext;
  readonly data: RecordingContext;
  readonly overlay: RecordingContext;
}

/** Paints a view onto recording contexts, colours named by what they mean. */
export function paintAll(model: TapeModel, view: TapeView, ratio = 1): PaintedTape {
  const lanes = layOutLanes(model, view);
  const layers = {
    paper: new RecordingContext(ratio),
    data: new RecordingContext(ratio),
    overlay: new RecordingContext(ratio),
  };
  paintPaper(layers.paper.ctx, model, view, lanes, NAMED_PALETTE);
  paintData(layers.data.ctx, model, view, lanes, NAMED_PALETTE);
  paintOverlay(layers.overlay.ctx, model, view, lanes, NAMED_PALETTE);
  return layers;
}
