import type { MigrationInterface, QueryRunner } from 'typeorm';

const TABLES = [
  'account',
  'refresh_token',
  'reset_token',
  'blob',
  'device',
  'build',
  'capture',
  'decode',
  'check_result',
  'job',
  'preset',
  'event',
];

/** Accounts, devices, captures, jobs, decodes and checks. */
export class FirstTables1764547200000 implements MigrationInterface {
  async up(runner: QueryRunner): Promise<void> {
    const statements = [
      `CREATE TABLE "account" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "email" text NOT NULL,
        "name" text NOT NULL,
        "role" text NOT NULL,
        "isActive" boolean NOT NULL DEFAULT (1),
        "passwordHash" text,
        "preferences" text NOT NULL,
        "tokenEpoch" integer NOT NULL DEFAULT (0),
        "createdAt" integer NOT NULL,
        "lastSeenAt" integer,
        CONSTRAINT "UQ_4c8f96ccf523e9a3faefd5bdd4c" UNIQUE ("email")
      )`,
      `CREATE TABLE "refresh_token" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "hash" text NOT NULL,
        "chain" text NOT NULL,
        "accountId" integer NOT NULL,
        "expiresAt" integer NOT NULL,
        "usedAt" integer,
        "revokedAt" integer,
        CONSTRAINT "UQ_1e2b7fe50cf96dbd9f4712f88bf" UNIQUE ("hash"),
        CONSTRAINT "FK_a693f961290344083b358599874" FOREIGN KEY ("accountId") REFERENCES "account" ("id") ON DELETE CASCADE ON UPDATE NO ACTION
      )`,
      `CREATE INDEX "IDX_2ff330403ee69483a01f5b263d" ON "refresh_token" ("chain")`,
      `CREATE TABLE "reset_token" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "hash" text NOT NULL,
        "accountId" integer,
        "expiresAt" integer NOT NULL,
        "usedAt" integer,
        CONSTRAINT "UQ_535a1a98db0147e71843486f0dc" UNIQUE ("hash"),
        CONSTRAINT "FK_3fbb045fd52d7556cec0fbbbb7b" FOREIGN KEY ("accountId") REFERENCES "account" ("id") ON DELETE CASCADE ON UPDATE NO ACTION
      )`,
      `CREATE TABLE "blob" (
        "sha256" text PRIMARY KEY NOT NULL,
        "size" integer NOT NULL,
        "createdAt" integer NOT NULL
      )`,
      `CREATE TABLE "device" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "name" text NOT NULL,
        "kind" text NOT NULL,
        "maker" text NOT NULL,
        "countsPerInch" real,
        "protocol" text,
        "notes" text NOT NULL,
        "createdAt" integer NOT NULL,
        CONSTRAINT "UQ_b17080419bd45586a3e78dfcc96" UNIQUE ("name")
      )`,
      `CREATE TABLE "build" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "deviceId" integer NOT NULL,
        "name" text NOT NULL,
        "board" text NOT NULL,
        "notes" text NOT NULL,
        "createdById" integer NOT NULL,
        "createdAt" integer NOT NULL,
        CONSTRAINT "FK_b7a46a2f6e4810937548ce89096" FOREIGN KEY ("deviceId") REFERENCES "device" ("id") ON DELETE RESTRICT ON UPDATE NO ACTION,
        CONSTRAINT "FK_0e9cf0fd54569075a4ec9580521" FOREIGN KEY ("createdById") REFERENCES "account" ("id") ON DELETE RESTRICT ON UPDATE NO ACTION
      )`,
      `CREATE UNIQUE INDEX "IDX_b241a3a17f041a092bd1c5b17e" ON "build" ("deviceId", "name")`,
      `CREATE TABLE "capture" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "fileName" text NOT NULL,
        "sha256" text NOT NULL,
        "ownerId" integer NOT NULL,
        "buildId" integer,
        "about" text NOT NULL,
        "state" text NOT NULL,
        "verdict" text,
        "violations" integer NOT NULL DEFAULT (0),
        "durationS" real,
        "createdAt" integer NOT NULL,
        CONSTRAINT "FK_2a2c1297640289c65967fab7ec0" FOREIGN KEY ("sha256") REFERENCES "blob" ("sha256") ON DELETE RESTRICT ON UPDATE NO ACTION,
        CONSTRAINT "FK_24dc26296f66fbf4b10a7395d32" FOREIGN KEY ("ownerId") REFERENCES "account" ("id") ON DELETE RESTRICT ON UPDATE NO ACTION,
        CONSTRAINT "FK_d207c6478984d0399b51b0059a1" FOREIGN KEY ("buildId") REFERENCES "build" ("id") ON DELETE RESTRICT ON UPDATE NO ACTION
      )`,
      `CREATE INDEX "IDX_2a2c1297640289c65967fab7ec" ON "capture" ("sha256")`,
      `CREATE INDEX "IDX_24dc26296f66fbf4b10a7395d3" ON "capture" ("ownerId")`,
      `CREATE INDEX "IDX_d207c6478984d0399b51b0059a" ON "capture" ("buildId")`,
      `CREATE INDEX "IDX_affcb01a7762a83df8ba3e7e59" ON "capture" ("state")`,
      `CREATE INDEX "IDX_768c35afbb484a6b1c9b7fe106" ON "capture" ("createdAt")`,
      `CREATE TABLE "decode" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "captureId" integer NOT NULL,
        "ordinal" integer NOT NULL,
        "request" text NOT NULL,
        "figures" text NOT NULL,
        "detail" text NOT NULL,
        "folder" text NOT NULL,
        "toolVersion" text NOT NULL,
        "accountId" integer NOT NULL,
        "createdAt" integer NOT NULL,
        CONSTRAINT "FK_f0b421ebc2d5a5f2bab0337986e" FOREIGN KEY ("captureId") REFERENCES "capture" ("id") ON DELETE CASCADE ON UPDATE NO ACTION,
        CONSTRAINT "FK_e6272ae020ba734b27cd3a5ec2b" FOREIGN KEY ("accountId") REFERENCES "account" ("id") ON DELETE RESTRICT ON UPDATE NO ACTION
      )`,
      `CREATE UNIQUE INDEX "IDX_856038575588799ec379a02955" ON "decode" ("captureId", "ordinal")`,
      `CREATE TABLE "check_result" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "decodeId" integer NOT NULL,
        "rulebook" text NOT NULL,
        "rulebookName" text NOT NULL,
        "rulebookVersion" integer NOT NULL,
        "verdict" text NOT NULL,
        "figures" text NOT NULL,
        "detail" text NOT NULL,
        "folder" text NOT NULL,
        "createdAt" integer NOT NULL,
        CONSTRAINT "FK_c1f3f13b5b632b808399ec64dc9" FOREIGN KEY ("decodeId") REFERENCES "decode" ("id") ON DELETE CASCADE ON UPDATE NO ACTION
      )`,
      `CREATE INDEX "IDX_c1f3f13b5b632b808399ec64dc" ON "check_result" ("decodeId")`,
      `CREATE TABLE "job" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "captureId" integer NOT NULL,
        "task" text NOT NULL,
        "state" text NOT NULL,
        "attempts" integer NOT NULL,
        "problem" text,
        "decodeId" integer,
        "checkId" integer,
        "accountId" integer NOT NULL,
        "createdAt" integer NOT NULL,
        CONSTRAINT "FK_e1626b633f1e1128987c36e8e5f" FOREIGN KEY ("captureId") REFERENCES "capture" ("id") ON DELETE CASCADE ON UPDATE NO ACTION,
        CONSTRAINT "FK_ebaddc2a0b7c1aa23d6fc97b67b" FOREIGN KEY ("accountId") REFERENCES "account" ("id") ON DELETE RESTRICT ON UPDATE NO ACTION
      )`,
      `CREATE INDEX "IDX_e1626b633f1e1128987c36e8e5" ON "job" ("captureId")`,
      `CREATE INDEX "IDX_d4ad1c50002ead62808d6c1560" ON "job" ("state")`,
      `CREATE TABLE "preset" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "name" text NOT NULL,
        "channels" text NOT NULL,
        "map" text NOT NULL,
        "options" text NOT NULL,
        "ownerId" integer NOT NULL,
        "createdAt" integer NOT NULL,
        CONSTRAINT "UQ_61be0f4cd549bd237a07cffdf01" UNIQUE ("name"),
        CONSTRAINT "FK_432b386356533d92a597ecb3bba" FOREIGN KEY ("ownerId") REFERENCES "account" ("id") ON DELETE RESTRICT ON UPDATE NO ACTION
      )`,
      `CREATE TABLE "event" (
        "id" integer PRIMARY KEY AUTOINCREMENT NOT NULL,
        "at" integer NOT NULL,
        "accountId" integer,
        "who" text NOT NULL,
        "what" text NOT NULL,
        "subject" text NOT NULL,
        "details" text NOT NULL
      )`,
      `CREATE INDEX "IDX_569863f658353af4ecc774baaf" ON "event" ("at")`,
    ];
    for (const statement of statements) await runner.query(statement);
  }

  async down(runner: QueryRunner): Promise<void> {
    for (const table of [...TABLES].reverse()) await runner.query(`DROP TABLE "${table}"`);
  }
}
