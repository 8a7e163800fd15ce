import type { Role } from '#shared/vocabulary';

export const ROLE_LABELS: Record<Role, string> = {
  'integration-engineer': 'integration engineer', 'vendor-engineer': 'vendor engineer', 'programme-manager': 'programme manager',
  'programme-administrator': 'programme administrator', observer: 'observer',
};
