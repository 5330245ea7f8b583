import { SmallPage } from '../_parts/small-page';
import { setPasswordAction } from '../actions';
import { SetPasswordForm } from '@/components/people/set-password-form';

export const metadata = { title: 'Choose a password' };

export default function SetPasswordPage() {
  return (
    <SmallPage title="Choose a password">
      <SetPasswordForm setPassword={setPasswordAction} />
    </SmallPage>
  );
}
