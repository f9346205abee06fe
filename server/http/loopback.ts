const LOOPBACK_ADDRESS = /^(127\.\d+\.\d+\.\d+|::1|::ffff:127\.\d+\.\d+\.\d+)$/;

/** An address of this very machine. */
export function isLoopbackAddress(address: string | undefined): boolean {
  return LOOPBACK_ADDRESS.test(address ?? '');
}

/** A host name that browsers themselves take for this machine, brackets of an IPv6 address or not. */
export function isLoopbackName(name: string): boolean {
  const bare = name.replace(/^\[(.*)\]$/, '$1');
  return bare === 'localhost' || bare.endsWith('.localhost') || isLoopbackAddress(bare);
}

/** The origins that are ours: the public one and, on loopback, its other names, since people type any of them. */
export function ownOrigins(publicUrl: string): string[] {
  const url = new URL(publicUrl);
  if (!isLoopbackName(url.hostname)) return [url.origin];
  const port = url.port === '' ? '' : `:${url.port}`;
  const others = ['127.0.0.1', 'localhost', '[::1]'].map((name) => `${url.protocol}//${name}${port}`);
  return [...new Set([url.origin, ...others])];
}
