import type { DemoAccountsResponse } from '../../shared/api/session.contract.js';

/**
 * One account a role, for the demo workshop alone. Invented people; `.example` is reserved and
 * never resolves (RFC 2606). The sign-in page shows the passwords, so they protect nothing.
 */
export const demoAccounts: readonly Readonly<DemoAccountsResponse['accounts'][number]>[] = [
  {
    email: 'owner@demo-workshop.example',
    password: 'demo-owner',
    role: 'owner',
    name: 'Odile Demo',
  },
  {
    email: 'lead@demo-workshop.example',
    password: 'demo-lead',
    role: 'shopLead',
    name: 'Sami Demo',
  },
  {
    email: 'designer@demo-workshop.example',
    password: 'demo-designer',
    role: 'designer',
    name: 'Dara Demo',
  },
  {
    email: 'maker@demo-workshop.example',
    password: 'demo-maker',
    role: 'maker',
    name: 'Mika Demo',
  },
];
