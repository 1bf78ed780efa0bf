import { totalmem } from 'node:os';
import { fileURLToPath } from 'node:url';
import { MessageChannel } from 'node:worker_threads';
import Piscina from 'piscina';
import type { WorkerAnswer, WorkerTask } from './worker-task';

const MIB = 1024 ** 2;
/** Heap of one thread; the edges of a capture do not lie in it. */
const HEAP_MIB = 1024;
/** Array buffers one task may hold, bytes. */
export const MEMORY_BUDGET = Math.min(1536 * MIB, Math.floor(totalmem() / 4));

type Unbudgeted<T> = T extends unknown ? Omit<T, 'memoryBudget' | 'port'> : never;
/** A task before the pool adds budget and port. */
export type PoolTask = Unbudgeted<WorkerTask>;

/** Threads that decode. One that runs out of memory or crashes is replaced; the server does not notice. */
export class WorkerPool {
  private readonly pool: Piscina;

  constructor(
    readonly threads: number,
    private readonly memoryBudget = MEMORY_BUDGET,
  ) {
    const isSource = import.meta.url.endsWith('.ts');
    this.pool = new Piscina({
      filename: fileURLToPath(
        new URL(isSource ? './decode-worker.ts' : './decode-worker.js', import.meta.url),
      ),
      minThreads: 0,
      maxThreads: threads,
      idleTimeout: 60_000,
      niceIncrement: 10,
      resourceLimits: { maxOldGenerationSizeMb: HEAP_MIB },
      ...(isSource ? sourceOptions() : {}),
    });
  }

  /** Rejects where the thread crashed, ran out of heap, or `signal` ended it. */
  async run(
    task: PoolTask,
    options: { signal?: AbortSignal; onPercent?: (percent: number) => void } = {},
  ): Promise<WorkerAnswer> {
    const { port1, port2 } = new MessageChannel();
    port1.on('message', (percent: number) => options.onPercent?.(percent));
    try {
      return (await this.pool.run(
        { ...task, memoryBudget: this.memoryBudget, port: port2 },
        { signal: options.signal, transferList: [port2] },
      )) as WorkerAnswer;
    } finally {
      port1.close();
    }
  }

  async stop(): Promise<void> {
    await this.pool.destroy();
  }
}

/** Run from the sources, a thread needs the same loader as its parent. */
function sourceOptions() {
  const tsconfig = fileURLToPath(new URL('../tsconfig.json', import.meta.url));
  return { execArgv: ['--import', 'tsx'], env: { ...process.env, TSX_TSCONFIG_PATH: tsconfig } };
}
