import * as z from 'zod';

export const roles = ['owner', 'shopLead', 'designer', 'maker'] as const;
export const roleSchema = z.enum(roles);
export type Role = z.infer<typeof roleSchema>;

/** How a role is written on a screen. */
export const roleNames: Record<Role, string> = {
  owner: 'Owner',
  shopLead: 'Shop lead',
  designer: 'Designer',
  maker: 'Maker',
};

/**
 * Who may do what: the one table from which the server checks and the client hints.
 * A route names its action; a role that is not listed here gets 403.
 */
export const permissions = {
  'model.read': ['owner', 'shopLead', 'designer', 'maker'],
  'model.write': ['owner', 'shopLead', 'designer'],
  'envelope.read': ['owner', 'shopLead', 'designer', 'maker'],
  'envelope.write': ['owner', 'shopLead'],
  'material.read': ['owner', 'shopLead', 'designer', 'maker'],
  'material.write': ['owner', 'shopLead'],
  'plan.read': ['owner', 'shopLead', 'designer', 'maker'],
  'plan.write': ['owner', 'shopLead', 'designer'],
  'job.read': ['owner', 'shopLead', 'designer', 'maker'],
  'job.cancel': ['owner', 'shopLead', 'designer'],
} as const satisfies Record<string, readonly Role[]>;
export type Action = keyof typeof permissions;

/** Whether a role may do an action. */
export function may(role: Role, action: Action): boolean {
  return (permissions[action] as readonly Role[]).includes(role);
}
