import type { Message, Target } from './message.js';

/**
 * HTTP POST of the message as JSON. The key travels as `Idempotency-Key`; a token, when one is named, comes from the environment.
 *
 * @param url     http or https, from the site file
 * @param token   value of the environment variable, never stored
 */
export function webhookTarget(url: string, on: readonly string[], token: string | undefined): Target {
  return {
    name: `webhook ${withoutSecrets(url)}`,
    on,
    send: async (message: Message, signal: AbortSignal) => {
      const headers: Record<string, string> = { 'content-type': 'application/json', 'idempotency-key': message.key };
      if (token !== undefined) headers.authorization = `Bearer ${token}`;
      const response = await fetch(url, { method: 'POST', headers, body: JSON.stringify(message), signal, redirect: 'error' });
      // The answer is read to its end, so that the connection can close.
      await response.arrayBuffer();
      return response.ok ? undefined : `the server answered ${response.status}`;
    },
  };
}

/** User, password and query never stand in a record. */
function withoutSecrets(url: string): string {
  try {
    const { protocol, host, pathname } = new URL(url);
    return `${protocol}//${host}${pathname}`;
  } catch {
    return 'with an unreadable address';
  }
}
