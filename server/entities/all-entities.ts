import { Account } from './account';
import { Blob } from './blob';
import { Build } from './build';
import { Capture } from './capture';
import { Check } from './check';
import { Decode } from './decode';
import { Device } from './device';
import { Event } from './event';
import { Job } from './job';
import { Preset } from './preset';
import { RefreshToken } from './refresh-token';
import { ResetToken } from './reset-token';

export const ALL_ENTITIES = [
  Account,
  RefreshToken,
  ResetToken,
  Device,
  Build,
  Blob,
  Capture,
  Preset,
  Job,
  Decode,
  Check,
  Event,
];
