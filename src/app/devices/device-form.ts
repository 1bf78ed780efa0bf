import {
  ChangeDetectionStrategy,
  Component,
  computed,
  effect,
  inject,
  input,
  output,
  signal,
} from '@angular/core';
import { NonNullableFormBuilder, ReactiveFormsModule, Validators } from '@angular/forms';
import { MatButton } from '@angular/material/button';
import type { DeviceView, NewDevice } from '#shared/contract/http/devices';
import { ApiClient } from '../api/api-client';
import type { Problem } from '../api/problem';
import { fieldMessage, toProblem } from '../api/problem';

type Kind = NewDevice['kind'];
type Protocol = NonNullable<NewDevice['protocol']>;

const KINDS: readonly Kind[] = ['mouse', 'trackball', 'touch surface', 'adapter'];
const PROTOCOLS: readonly Protocol[] = ['M', 'M3', 'MZ', 'M-null', 'five-byte', 'three-byte', 'MM'];

/** Makes a device or changes one. */
@Component({
  selector: 'lw-device-form',
  templateUrl: './device-form.html',
  styleUrl: './form.scss',
  imports: [MatButton, ReactiveFormsModule],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class DeviceForm {
  private readonly api = inject(ApiClient);

  /** To change; a new one is made where left out. */
  readonly device = input<DeviceView | null>(null);
  readonly saved = output<DeviceView>();

  protected readonly kinds = KINDS;
  protected readonly protocols = PROTOCOLS;
  protected readonly isBusy = signal(false);
  protected readonly problem = signal<Problem | null>(null);
  protected readonly form = inject(NonNullableFormBuilder).group({
    name: ['', Validators.required],
    kind: ['mouse' as Kind],
    maker: [''],
    countsPerInch: [''],
    protocol: ['' as '' | Protocol],
    notes: [''],
  });
  protected readonly messageFor = (path: string) => fieldMessage(this.problem(), path);
  protected readonly isNew = computed(() => this.device() === null);

  constructor() {
    effect(() => {
      const device = this.device();
      if (device === null) return;
      const { name, kind, maker, notes } = device;
      this.form.setValue({
        name,
        kind,
        maker,
        notes,
        countsPerInch: device.countsPerInch === null ? '' : String(device.countsPerInch),
        protocol: (device.protocol ?? '') as '' | Protocol,
      });
    });
  }

  protected save(): void {
    this.form.markAllAsTouched();
    if (this.form.invalid || this.isBusy()) return;
    const { countsPerInch, protocol, ...rest } = this.form.getRawValue();
    const counts = Number(countsPerInch);
    const body: NewDevice = {
      ...rest,
      countsPerInch: countsPerInch.trim() === '' ? null : counts,
      protocol: protocol === '' ? null : protocol,
    };
    const device = this.device();
    this.isBusy.set(true);
    this.problem.set(null);
    const asked =
      device === null
        ? this.api.ask('POST /devices', { body })
        : this.api.ask('PATCH /devices/:id', { params: { id: device.id }, body });
    asked.subscribe({
      next: (saved) => {
        this.isBusy.set(false);
        this.saved.emit(saved);
      },
      error: (error: unknown) => {
        this.isBusy.set(false);
        this.problem.set(toProblem(error));
      },
    });
  }
}
