'use client';

import { FormShell, type FormAction } from '@/components/account/form-shell';

export interface KeeperFormProps {
  action: FormAction;
  token: string;
}

export function AgreeToKeepForm({ action, token }: KeeperFormProps) {
  return (
    <FormShell action={action} submit="Keep checkpoints" busy="Keeping">
      {() => <input type="hidden" name="token" value={token} />}
    </FormShell>
  );
}

export function StopKeepingForm({ action, token }: KeeperFormProps) {
  return (
    <FormShell action={action} submit="Stop these mails" busy="Stopping" look="plain">
      {() => <input type="hidden" name="token" value={token} />}
    </FormShell>
  );
}
