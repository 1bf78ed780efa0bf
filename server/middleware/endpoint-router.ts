import type { NextFunction, Request, RequestHandler, Response } from 'express';
import { Router } from 'express';
import type * as z from 'zod';
import type { Endpoint } from '#shared/contract/http/endpoint';
import type { EndpointKey } from '#shared/contract/http/endpoints';
import { ENDPOINTS } from '#shared/contract/http/endpoints';
import type { Account } from '../entities/account';
import type { OwnedKey, PublicKey } from '../permissions';
import { mayAsk, mayTouch, permissionOf, PERMISSIONS } from '../permissions';
import { Forbidden } from '../services/service-error';

type Endpoints = typeof ENDPOINTS;
type Parsed<K extends EndpointKey, Part extends 'params' | 'query' | 'body'> =
  Endpoints[K] extends Record<Part, infer S extends z.ZodType> ? z.output<S> : undefined;
type Answer<K extends EndpointKey> = Endpoints[K] extends { answer: infer S extends z.ZodType }
  ? z.input<S>
  : unknown;

/** One request as a handler sees it: checked, and asked by somebody who may. */
export interface Call<K extends EndpointKey> {
  readonly params: Parsed<K, 'params'>;
  readonly query: Parsed<K, 'query'>;
  /** Of uploads undefined: their handler reads it. */
  readonly body: Endpoints[K] extends { isUpload: true } ? undefined : Parsed<K, 'body'>;
  readonly account: K extends PublicKey ? undefined : Account;
  readonly req: Request;
  readonly res: Response;
}

/** Answers with what goes out as JSON. Endpoints with a `media` of their own write to `res` themselves. */
export type Handler<K extends EndpointKey> = (call: Call<K>) => Promise<Answer<K>> | Answer<K>;

/** Whose the thing is that the parameters name. @throws NotFound where there is none */
export type OwnerLookup<K extends EndpointKey> = (params: Parsed<K, 'params'>) => Promise<number>;

type AnyCall = Call<EndpointKey>;
type AnyHandler = (call: AnyCall) => unknown;

export interface RouterParts {
  /** Sets `req.user`, or refuses. */
  readonly authenticate: RequestHandler;
  readonly limiterOf: (key: EndpointKey) => RequestHandler;
  /** Whether answers are held against the contract: in tests. */
  readonly isChecking: boolean;
}

/** Makes routes out of the contract and the table of permissions; handlers only say what they do. */
export class EndpointRouter {
  private readonly handlers = new Map<EndpointKey, AnyHandler>();
  private readonly owners = new Map<EndpointKey, (params: never) => Promise<number>>();

  on<K extends Exclude<EndpointKey, OwnedKey>>(key: K, handler: Handler<K>): this {
    this.handlers.set(key, handler as unknown as AnyHandler);
    return this;
  }

  /** For endpoints where it matters whose the thing is. */
  onOwned<K extends OwnedKey>(key: K, ownerOf: OwnerLookup<K>, handler: Handler<K>): this {
    this.handlers.set(key, handler as unknown as AnyHandler);
    this.owners.set(key, ownerOf);
    return this;
  }

  /** @throws Error that names what is missing: an endpoint without a handler or a permission */
  build(parts: RouterParts): Router {
    refuseGaps([...this.handlers.keys()]);
    const router = Router({ caseSensitive: true });
    for (const [key, handler] of this.handlers) {
      const [method, path] = key.split(' ');
      const chain = [parts.limiterOf(key)];
      if (permissionOf(key) !== 'public') chain.push(parts.authenticate, this.permit(key));
      const register = method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete';
      router[register](path, ...chain, this.handle(key, handler, parts.isChecking));
    }
    return router;
  }

  private permit(key: EndpointKey): RequestHandler {
    return async (req: Request, _res: Response, next: NextFunction) => {
      const { account } = req.user!;
      if (!mayAsk(key, account.role)) {
        throw new Forbidden('role', `Your role, ${account.role}, may not do this.`);
      }
      const ownerOf = this.owners.get(key);
      if (ownerOf !== undefined) {
        const params = (ENDPOINTS[key] as Endpoint).params!.parse(req.params) as never;
        if (!mayTouch(key, account, await ownerOf(params))) {
          throw new Forbidden('not-yours', 'This belongs to somebody else.');
        }
      }
      next();
    };
  }

  private handle(key: EndpointKey, handler: AnyHandler, isChecking: boolean): RequestHandler {
    const endpoint: Endpoint = ENDPOINTS[key];
    return async (req, res) => {
      const call = {
        params: endpoint.params?.parse(req.params),
        query: endpoint.query?.parse(req.query),
        body: endpoint.isUpload === true ? undefined : endpoint.body?.parse(req.body ?? {}),
        account: req.user?.account,
        req,
        res,
      } as unknown as AnyCall;
      const answer = await handler(call);
      if (endpoint.media !== undefined) return;
      res.set('Cache-Control', 'no-store');
      if (endpoint.answer === undefined) {
        res.status(endpoint.status ?? 204).end();
        return;
      }
      if (isChecking) refuseDeviation(key, endpoint.answer, answer);
      res.status(endpoint.status ?? 200).json(answer);
    };
  }
}

/** An answer that is not what the contract says is a fault of ours. */
function refuseDeviation(key: EndpointKey, schema: z.ZodType, answer: unknown): void {
  const { error } = schema.safeParse(answer);
  if (error !== undefined) throw new Error(`${key} answers against the contract: ${error.message}`);
}

/** @throws Error that names the endpoints where table, contract and handlers differ */
export function refuseGaps(handled: readonly string[]): void {
  const inContract = Object.keys(ENDPOINTS);
  const inTable = Object.keys(PERMISSIONS);
  const gaps = [
    ...inContract.filter((key) => !inTable.includes(key)).map((key) => `${key} has no permission`),
    ...handled.filter((key) => !inTable.includes(key)).map((key) => `${key} has no permission`),
    ...inContract.filter((key) => !handled.includes(key)).map((key) => `${key} has no handler`),
    ...inTable.filter((key) => !inContract.includes(key)).map((key) => `${key} is not in the contract`),
  ];
  if (gaps.length > 0) throw new Error(gaps.join('; '));
}
