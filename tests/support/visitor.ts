/** A browser reduced to what sign-in needs: cookies by name and path, whatever the port, redirects by hand. */
export class Visitor {
  readonly #cookies = new Map<string, { name: string; value: string; path: string }>();

  cookie(name: string): string | undefined {
    return [...this.#cookies.values()].find((cookie) => cookie.name === name)?.value;
  }

  setCookie(name: string, value: string): void {
    this.#cookies.set(`${name} /`, { name, value, path: '/' });
  }

  cookieNames(): string[] {
    return [...this.#cookies.values()].map(({ name }) => name);
  }

  /** One request, no redirect followed. */
  async ask(url: string, init: RequestInit = {}): Promise<Response> {
    const headers = new Headers(init.headers);
    const { pathname } = new URL(url);
    const sent = [...this.#cookies.values()].filter(({ path }) => pathname.startsWith(path));
    headers.set('cookie', sent.map(({ name, value }) => `${name}=${value}`).join('; '));
    const response = await fetch(url, { ...init, headers, redirect: 'manual' });
    for (const line of response.headers.getSetCookie()) this.#keep(line);
    return response;
  }

  /** Follows redirects until a page or a refusal stands; returns it with its address. */
  async visit(url: string, init: RequestInit = {}): Promise<{ response: Response; url: string }> {
    let at = url;
    let response = await this.ask(at, init);
    for (let hops = 0; hops < 15 && response.status >= 300 && response.status < 400; hops++) {
      at = new URL(response.headers.get('location') ?? '/', at).href;
      response = await this.ask(at);
    }
    return { response, url: at };
  }

  /** From a sign-in address through the provider's page and back; returns where it ended. */
  async signIn(url: string, email: string, password: string): Promise<{ response: Response; url: string }> {
    const page = await this.visit(url);
    const { pathname, origin } = new URL(page.url);
    if (!pathname.startsWith('/interaction/')) return page;
    const body = new URLSearchParams({ email, password });
    return this.visit(`${origin}${pathname}`, { method: 'POST', body });
  }

  #keep(line: string): void {
    const [pair, ...attributes] = line.split(';');
    const at = pair.indexOf('=');
    const [name, value] = [pair.slice(0, at), pair.slice(at + 1)];
    const attribute = (wanted: string) => attributes.map((one) => one.trim()).find((one) => one.toLowerCase().startsWith(wanted))?.slice(wanted.length);
    const path = attribute('path=') ?? '/';
    const expires = attribute('expires=');
    if (value === '' || (expires && Date.parse(expires) < Date.now())) this.#cookies.delete(`${name} ${path}`);
    else this.#cookies.set(`${name} ${path}`, { name, value, path });
  }
}
