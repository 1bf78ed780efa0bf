/** Bundles the server into a folder, which stands two folders deep below the root as the sources do. */
export function bundleServer(outdir: string): Promise<void>;
