import type { EntityManager, SelectQueryBuilder } from 'typeorm';
import { Brackets } from 'typeorm';
import type * as z from 'zod';
import type { CapturePage, captureQuerySchema } from '#shared/contract/http/captures';
import type { PersonRef } from '#shared/contract/http/accounts';
import { PAGE_SIZE } from '#shared/contract/http/captures';
import { Account } from '../entities/account';
import { Capture } from '../entities/capture';
import { toPersonRef } from './account-view';

type Query = z.output<typeof captureQuerySchema>;

const WEEK_MS = 7 * 24 * 3600_000;

/** Captures with all a view of them needs. */
export function selectCaptures(reader: EntityManager): SelectQueryBuilder<Capture> {
  return reader
    .createQueryBuilder(Capture, 'capture')
    .innerJoinAndSelect('capture.blob', 'blob')
    .innerJoinAndSelect('capture.owner', 'owner')
    .leftJoinAndSelect('capture.build', 'build')
    .leftJoinAndSelect('build.device', 'device');
}

/** One page of what was asked for, and how many there are in all. */
export async function queryCaptures(
  reader: EntityManager,
  query: Query,
): Promise<{ captures: Capture[]; total: number }> {
  const select = selectCaptures(reader);
  if (query.device !== undefined) select.andWhere('device.id = :device', { device: query.device });
  if (query.build !== undefined) select.andWhere('build.id = :build', { build: query.build });
  if (query.owner !== undefined) select.andWhere('owner.id = :owner', { owner: query.owner });
  if (query.state !== undefined) select.andWhere('capture.state = :state', { state: query.state });
  if (query.verdict !== undefined) select.andWhere('capture.verdict = :verdict', { verdict: query.verdict });
  if (query.search !== undefined && query.search !== '') search(select, query.search);
  const total = await select.getCount();
  sort(select, query.sort);
  const captures = await select
    .limit(PAGE_SIZE)
    .offset((query.page - 1) * PAGE_SIZE)
    .getMany();
  return { captures, total };
}

function search(select: SelectQueryBuilder<Capture>, text: string): void {
  const like = { like: `%${text.replace(/[\\%_]/g, '\\$&')}%` };
  const number = /^(?:LW-?)?0*(\d{1,9})$/i.exec(text)?.[1];
  select.andWhere(
    new Brackets((or) => {
      for (const column of ['capture.fileName', 'build.name', 'device.name']) {
        or.orWhere(`${column} LIKE :like ESCAPE '\\'`, like);
      }
      or.orWhere("json_extract(capture.about, '$.subject') LIKE :like ESCAPE '\\'", like);
      or.orWhere('capture.sha256 LIKE :seal', { seal: `${text.toLowerCase().replace(/[^0-9a-f]/g, '-')}%` });
      if (number !== undefined) or.orWhere('capture.id = :number', { number: Number(number) });
    }),
  );
}

function sort(select: SelectQueryBuilder<Capture>, by: Query['sort']): void {
  if (by === 'worst') {
    select
      .addSelect(
        "CASE capture.verdict WHEN 'fail' THEN 0 WHEN 'inconclusive' THEN 1 WHEN 'pass' THEN 2 ELSE 3 END",
        'rank',
      )
      .orderBy('rank', 'ASC')
      .addOrderBy('capture.violations', 'DESC');
  } else if (by === 'longest') {
    select.orderBy('capture.durationS', 'DESC', 'NULLS LAST');
  }
  select.addOrderBy('capture.id', by === 'oldest' ? 'ASC' : 'DESC');
}

/** Figures of the whole workspace. */
export async function countWorkspace(reader: EntityManager): Promise<CapturePage['counts']> {
  const rows = await reader.query<CapturePage['counts'][]>(
    `SELECT COUNT(*) AS registered,
       COALESCE(SUM(createdAt >= ?), 0) AS thisWeek,
       COALESCE(SUM(violations), 0) AS violations,
       COALESCE(SUM(violations > 0), 0) AS capturesWithViolations,
       COALESCE(SUM(state = 'received'), 0) AS unmapped
     FROM capture`,
    [Date.now() - WEEK_MS],
  );
  return rows[0];
}

/** Everybody who has a capture, by name. */
export async function listOwners(reader: EntityManager): Promise<PersonRef[]> {
  const owners = await reader
    .createQueryBuilder(Account, 'account')
    .where('EXISTS (SELECT 1 FROM capture WHERE capture.ownerId = account.id)')
    .orderBy('account.name')
    .getMany();
  return owners.map(toPersonRef);
}
