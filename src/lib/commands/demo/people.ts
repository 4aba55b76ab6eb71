import type { Role } from '$lib/server/auth/permissions';

/** Five invented people of an invented observatory. */
export const DEMO_PEOPLE: { name: string; email: string; roles: Role[]; isAdmin?: boolean }[] = [
  { name: 'Rua Tamsin', email: 'rua@cape-halloran.example', roles: ['observer'] },
  { name: 'Ines Vardal', email: 'ines@cape-halloran.example', roles: ['scientist'] },
  { name: 'Koji Brandt', email: 'koji@cape-halloran.example', roles: ['scientist'] },
  { name: 'Maren Oyela', email: 'maren@cape-halloran.example', roles: ['curator'], isAdmin: true },
  { name: 'Felix Dorado', email: 'felix@cape-halloran.example', roles: ['curator', 'scientist'] },
];

export interface DemoAccount {
  name: string;
  email: string;
  password: string;
  roles: string;
}
