import { AskResetForm } from '@/components/people/ask-reset-form';
import { SmallPage } from '../_parts/small-page';
import { askResetAction } from '../actions';

export const metadata = { title: 'Forgotten password' };

export default function ForgottenPage() {
  return (
    <SmallPage title="Forgotten your password?">
      <AskResetForm ask={askResetAction} />
    </SmallPage>
  );
}
