import type { IncomingMessage } from 'node:http';

/** Several times what the longest answer takes. */
const mostBytes = 4096;

export type Body =
  | { readonly kind: 'whole'; readonly text: string }
  | { readonly kind: 'too-long' }
  /** Whoever sent it went away, or took too long over it, which the server's own patience ends. */
  | { readonly kind: 'gone' };

/** What is sent with a request, of which no more is kept than an answer needs. */
export function readBody(request: IncomingMessage): Promise<Body> {
  return new Promise((resolve) => {
    const chunks: Buffer[] = [];
    let bytes = 0;
    request.on('data', (chunk: Buffer) => {
      bytes += chunk.length;
      if (bytes <= mostBytes) chunks.push(chunk);
      else resolve({ kind: 'too-long' });
    });
    request.once('end', () => {
      resolve({ kind: 'whole', text: Buffer.concat(chunks).toString('utf8') });
    });
    request.once('close', () => {
      resolve({ kind: 'gone' });
    });
    request.on('error', () => {
      resolve({ kind: 'gone' });
    });
  });
}
