/** Whether an address (with scheme) leads to this machine alone. Throws for what is no address. */
export function isLoopback(address: string): boolean {
  const { hostname } = new URL(address);
  return hostname === 'localhost' || hostname === '[::1]' || /^127(\.\d{1,3}){3}$/.test(hostname);
}
