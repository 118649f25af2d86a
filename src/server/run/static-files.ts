import { createReadStream } from 'node:fs';
import { readdir, stat } from 'node:fs/promises';
import type { IncomingMessage, ServerResponse } from 'node:http';
import { extname, join, relative } from 'node:path';
import { pipeline } from 'node:stream';

const types: Record<string, string> = {
  '.css': 'text/css; charset=utf-8',
  '.ico': 'image/x-icon',
  '.jpg': 'image/jpeg',
  '.js': 'text/javascript; charset=utf-8',
  '.json': 'application/json',
  '.png': 'image/png',
  '.svg': 'image/svg+xml',
  '.txt': 'text/plain; charset=utf-8',
  '.webmanifest': 'application/manifest+json',
  '.webp': 'image/webp',
  '.woff2': 'font/woff2',
};

interface StaticFile {
  file: string;
  bytes: number;
  type: string;
  etag: string;
  /** Its name carries a hash of its bytes, so that it may be kept for good. */
  isHashed: boolean;
}

/** Answers a request for a file of the build; false when there is none by that path. */
export type ServeStatic = (path: string, request: IncomingMessage, response: ServerResponse) => boolean;

async function indexFolder(folder: string, within: string, index: Map<string, StaticFile>): Promise<void> {
  for (const entry of await readdir(within, { withFileTypes: true }).catch(() => [])) {
    const file = join(within, entry.name);
    if (entry.isDirectory()) await indexFolder(folder, file, index);
    else if (entry.isFile()) {
      const { size, mtimeMs } = await stat(file);
      const path = `/${relative(folder, file)}`;
      index.set(path, {
        file,
        bytes: size,
        type: types[extname(file).toLowerCase()] ?? 'application/octet-stream',
        etag: `"${size.toString(36)}-${Math.floor(mtimeMs).toString(36)}"`,
        isHashed: path.startsWith('/_astro/'),
      });
    }
  }
}

/** Reads a folder's file names once; only those are ever served, so no path can lead out of it. */
export async function staticFiles(folder: string): Promise<ServeStatic> {
  const index = new Map<string, StaticFile>();
  await indexFolder(folder, folder, index);
  return (path, request, response) => {
    const found = index.get(path);
    if (!found || (request.method !== 'GET' && request.method !== 'HEAD')) return false;
    response.setHeader('Content-Type', found.type);
    response.setHeader('ETag', found.etag);
    response.setHeader(
      'Cache-Control',
      found.isHashed ? 'public, max-age=31536000, immutable' : 'public, no-cache',
    );
    if (request.headers['if-none-match'] === found.etag) {
      response.writeHead(304).end();
      return true;
    }
    response.setHeader('Content-Length', found.bytes);
    response.writeHead(200);
    if (request.method === 'HEAD') response.end();
    else pipeline(createReadStream(found.file), response, () => undefined);
    return true;
  };
}
