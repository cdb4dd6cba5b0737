import type { z } from 'zod';
import type { PendingInvite, StaffMember } from '@shared/schemas/accounts';
import type { StaffAccount } from '../models/StaffAccount';
import type { StaffToken } from '../models/StaffToken';

export const presentStaffMember = (account: StaffAccount): StaffMember => ({
  id: account.id,
  name: account.name,
  email: account.email,
  role: account.role,
  disabled: account.disabled_ms !== null,
});

export const presentInvite = (invite: StaffToken): z.infer<typeof PendingInvite> => ({
  id: invite.id,
  email: invite.email!,
  role: invite.role!,
  expires_wall_ms: invite.expires_ms,
});
