/** Ports on the loopback interface. */
import { createServer } from 'node:net';
import { PlainError } from './say.mjs';

export function isFree(port) {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(false));
    probe.listen({ port, host: '127.0.0.1', exclusive: true }, () => probe.close(() => resolve(true)));
  });
}

/** The first free port from `first` on. */
export async function freePortFrom(first) {
  for (let port = first; port < first + 400; port++) if (await isFree(port)) return port;
  throw new PlainError(`No free port between ${first} and ${first + 399}.`);
}

/** `wanted`: what listens → [port, the variable that moves it]. Names the first that is taken. */
export async function refuseTakenPorts(wanted) {
  for (const [what, [port, variable]] of Object.entries(wanted)) {
    if (await isFree(port)) continue;
    throw new PlainError(`Port ${port} (${what}) is taken by another program. Stop that program, or choose another port: ${variable}=${port + 100} npm start`);
  }
}

/** What this start will listen on, with the variable that moves each port. */
export function portsToListen({ ports, local }) {
  return {
    ...(ports.pages && { 'the pages': [ports.pages, 'PORT'] }),
    'Crosstie itself': [ports.web, 'PORT'],
    ...(local.provider && { 'the demo\'s identity provider': [ports.provider, 'IDP_PORT'] }),
    ...(local.mail && { 'the page of caught mail': [ports.mailPage, 'MAIL_PAGE_PORT'], 'caught mail': [ports.mailSmtp, 'MAIL_SMTP_PORT'] }),
  };
}
