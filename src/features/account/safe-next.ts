/** Where to go after signing in: an address of this product, whatever the link said. */
export function safeNext(next: string | null): string {
  if (!next?.startsWith('/')) return '/';
  try {
    const { origin, pathname, search } = new URL(next, 'http://here.invalid');
    return origin === 'http://here.invalid' && !pathname.startsWith('//') ? pathname + search : '/';
  } catch {
    return '/';
  }
}
