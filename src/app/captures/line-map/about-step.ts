import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  output,
  untracked,
} from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { FormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import type { AboutCapture, CaptureView } from '#shared/contract/http/captures';
import type { RulebookKey } from '#shared/contract/http/rulebooks';
import { ApiClient } from '../../api/api-client';
import { loadWhen } from '../../api/load-when';

export interface AboutAnswer {
  readonly about: AboutCapture;
  readonly buildId: number | null;
}

const TEXTS = [
  ['unitSerial', 'Unit serial number'],
  ['instrument', 'Instrument'],
  ['probe', 'Probe'],
  ['threshold', 'Threshold'],
  ['hostPort', 'Host port'],
  ['cable', 'Cable'],
  ['supply', 'Supply'],
  ['operator', 'Operator'],
] as const;

/** What an auditor asks of a capture. */
@Component({
  selector: 'lw-about-step',
  templateUrl: './about-step.html',
  styleUrl: './steps.scss',
  imports: [ReactiveFormsModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AboutStep {
  private readonly api = inject(ApiClient);

  readonly capture = input.required<CaptureView>();
  readonly isBatch = input.required<boolean>();
  /** What was filled in before. */
  readonly answer = input.required<AboutAnswer | null>();
  readonly rulebook = input.required<RulebookKey>();
  readonly answered = output<AboutAnswer>();
  readonly rulebookChosen = output<RulebookKey>();

  protected readonly texts = TEXTS;
  protected readonly form = inject(FormBuilder).nonNullable.group({
    subject: ['', Validators.maxLength(200)],
    buildId: [''],
    unitSerial: [''],
    instrument: [''],
    calibrationDue: [''],
    probe: [''],
    probedEnd: ['' as '' | NonNullable<AboutCapture['probedEnd']>],
    threshold: [''],
    hostPort: [''],
    cable: [''],
    supply: [''],
    temperatureC: [''],
    operator: [''],
    notes: [''],
  });
  private readonly devicesState = loadWhen(
    computed(() => 0),
    () => this.api.ask('GET /devices'),
  );
  protected readonly devices = computed(() => {
    const state = this.devicesState();
    return state.status === 'ready' ? state.value : [];
  });
  private readonly rulebooksState = loadWhen(
    computed(() => 0),
    () => this.api.ask('GET /rulebooks'),
  );
  protected readonly rulebooks = computed(() => {
    const state = this.rulebooksState();
    return state.status === 'ready' ? state.value : [];
  });

  constructor() {
    effect(() => {
      const capture = this.capture();
      untracked(() =>
        this.fill(
          this.answer() ?? {
            about: this.isBatch() ? {} : capture.about,
            buildId: this.isBatch() ? null : (capture.build?.id ?? null),
          },
        ),
      );
    });
    this.form.valueChanges.pipe(takeUntilDestroyed()).subscribe(() => this.tell());
  }

  private fill({ about, buildId }: AboutAnswer): void {
    this.form.setValue(
      {
        subject: about.subject ?? '',
        buildId: buildId === null ? '' : String(buildId),
        unitSerial: about.unitSerial ?? '',
        instrument: about.instrument ?? '',
        calibrationDue: about.calibrationDue ?? '',
        probe: about.probe ?? '',
        probedEnd: about.probedEnd ?? '',
        threshold: about.threshold ?? '',
        hostPort: about.hostPort ?? '',
        cable: about.cable ?? '',
        supply: about.supply ?? '',
        temperatureC:
          about.temperatureC === null || about.temperatureC === undefined ? '' : String(about.temperatureC),
        operator: about.operator ?? '',
        notes: about.notes ?? '',
      },
      { emitEvent: false },
    );
  }

  private tell(): void {
    const { buildId, probedEnd, calibrationDue, temperatureC, ...texts } = this.form.getRawValue();
    const celsius = Number(temperatureC);
    this.answered.emit({
      about: {
        ...texts,
        probedEnd: probedEnd === '' ? null : probedEnd,
        calibrationDue: calibrationDue === '' ? null : calibrationDue,
        temperatureC: temperatureC.trim() !== '' && Number.isFinite(celsius) ? celsius : null,
      },
      buildId: buildId === '' ? null : Number(buildId),
    });
  }
}
