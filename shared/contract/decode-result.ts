import * as z from 'zod';

/*
 * The JSON of one decode: a contract, other programs read it. Fields may be added; none is renamed or removed.
 * Times are seconds of the file's own clock.
 */

const verdict = z.enum(['pass', 'violation', 'inconclusive', 'not-shown', 'not-applicable']);
const severity = z.enum(['blocking', 'warning', 'note']);
const uncertaintyKind = z.enum(['bound', 'k2']);

const line = z.object({
  channel: z.string(),
  polarity: z.enum(['line', 'logic']),
  thresholds: z.object({ high: z.number(), low: z.number() }).nullable(),
});

const pnpField = z.string().nullable();

export const decodeResultSchema = z.object({
  tool: z.object({ name: z.string(), version: z.string() }),
  capture: z.object({
    file: z.string(),
    sha256: z.string(),
    format: z.enum(['vcd', 'csv', 'bytes']),
    bytes: z.number(),
    startS: z.number(),
    endS: z.number(),
    resolutionS: z.number(),
    channels: z.array(
      z.object({
        name: z.string(),
        kind: z.enum(['digital', 'analog']),
        edges: z.number(),
        aliases: z.array(z.string()),
      }),
    ),
    defects: z.array(
      z.object({
        code: z.string(),
        line: z.number().nullable(),
        column: z.number().nullable(),
        byte: z.number().nullable(),
        message: z.string(),
      }),
    ),
    gaps: z.array(z.object({ startS: z.number(), endS: z.number() })),
  }),
  lines: z.object({
    data: line.nullable(),
    rts: line.nullable(),
    dtr: line.nullable(),
    txd: line.nullable(),
    dsr: line.nullable(),
    supply: line.nullable(),
    contact: line.nullable(),
    ready: line.nullable(),
  }),
  detections: z.array(
    z.object({
      subject: z.enum(['line', 'polarity', 'bit-rate', 'framing', 'protocol']),
      role: z.string().nullable(),
      chosen: z.string(),
      reason: z.string(),
      runnerUp: z.string().nullable(),
    }),
  ),
  framing: z
    .object({
      bitRate: z.number(),
      nominalBitRate: z.number(),
      dataBits: z.number(),
      parity: z.enum(['none', 'odd', 'even', 'mark']),
      stopBits: z.number(),
    })
    .nullable(),
  protocol: z.string().nullable(),
  characters: z.array(
    z.object({
      t: z.number(),
      value: z.number(),
      errors: z.array(z.enum(['framing', 'parity', 'break'])),
    }),
  ),
  controlEvents: z.array(z.object({ t: z.number(), line: z.enum(['rts', 'dtr']), on: z.boolean() })),
  resets: z.array(
    z.object({
      t: z.number(),
      offS: z.number(),
      replyT: z.number().nullable(),
      latencyS: z.number().nullable(),
      identity: z.string().nullable(),
      pnp: z
        .object({
          raw: z.string(),
          form: z.number(),
          complete: z.boolean(),
          revision: z.string().nullable(),
          eisaId: pnpField,
          productId: pnpField,
          serialNumber: pnpField,
          className: pnpField,
          driverId: pnpField,
          userName: pnpField,
          checksumSent: pnpField,
          checksumComputed: pnpField,
          deviations: z.array(
            z.object({ rule: z.string(), message: z.string(), offset: z.number().nullable() }),
          ),
        })
        .nullable(),
      powerUp: z.boolean().nullable(),
    }),
  ),
  packets: z.array(
    z.object({
      t: z.number(),
      tEnd: z.number(),
      dx: z.number(),
      dy: z.number(),
      wheel: z.number().nullable(),
      buttons: z.array(z.enum(['left', 'middle', 'right', 'fourth'])),
      steps: z.array(z.object({ dx: z.number(), dy: z.number() })).optional(),
    }),
  ),
  glitches: z.array(z.object({ t: z.number(), tEnd: z.number() })),
  rulebook: z.object({ name: z.string(), version: z.number() }),
  rules: z.array(
    z.object({
      id: z.string(),
      verdict,
      severity,
      n: z.number(),
      measured: z.number().nullable(),
      uncertainty: z.number().nullable(),
      uncertaintyKind: uncertaintyKind.nullable(),
      limit: z.number().nullable(),
      unit: z.string().nullable(),
      reason: z.string(),
    }),
  ),
  findings: z.array(
    z.object({
      rule: z.string(),
      verdict,
      severity,
      t: z.number(),
      tEnd: z.number(),
      measured: z.number().nullable(),
      uncertainty: z.number().nullable(),
      uncertaintyKind: uncertaintyKind.nullable(),
      limit: z.number().nullable(),
      unit: z.string().nullable(),
      message: z.string(),
    }),
  ),
  metrics: z.record(z.string(), z.number().nullable()),
  verdict: z.enum(['pass', 'fail', 'inconclusive']),
});

export type DecodeResult = z.infer<typeof decodeResultSchema>;
