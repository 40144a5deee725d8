import type { Role } from './words';

/** The invented people of the demo shop; the seed makes them, the sign-in page shows them in local mode only. */
export const demoPassword = 'harbour-lamp-42';
export const demoPeople: readonly { name: string; email: string; role: Role }[] = [
  { name: 'Ines Talvik', email: 'ines@quayside.example', role: 'owner' },
  { name: 'Jory Pell', email: 'jory@quayside.example', role: 'refurbisher' },
  { name: 'Maren Osk', email: 'maren@quayside.example', role: 'grader' },
];
