import { useQuery } from '@tanstack/react-query';
import { Heading } from '../../components/ui/Heading';
import { Sheet } from '../../components/ui/Sheet';
import { api } from '../../lib/api';
import { queryClient } from '../../lib/query-client';
import { paths } from '../../schemas/paths';
import type { AccountPage } from '../../schemas/api/my-account';
import type { TokensPage } from '../../schemas/api/tokens';
import { EmailForm, PasswordForm } from './CredentialForms';
import { SecondFactor } from './SecondFactor';
import { Sessions } from './Sessions';
import { Tokens } from './Tokens';
import { accountWords } from '../../words/account';

const KEY = ['account'];

/** One's own account: password, address, second factor, where one is signed in. */
export function Account({ initial, tokens }: { initial: AccountPage; tokens: TokensPage | null }) {
  const client = queryClient();
  const { data: page } = useQuery(
    {
      queryKey: KEY,
      queryFn: ({ signal }) => api<AccountPage>(paths.api.account(), { signal }),
      initialData: initial,
    },
    client,
  );
  const again = () => void client.invalidateQueries({ queryKey: KEY });
  const others = page.sessions.filter((s) => !s.here).length;
  return (
    <>
      <Heading
        finding={others === 0 ? accountWords.onThisDeviceOnly : accountWords.onDevices(others)}
        sentence={accountWords.whoYouAre(
          page.person.name,
          page.person.role,
          page.person.organisation,
          page.person.email,
        )}
      />
      <div className="grid gap-5 lg:grid-cols-2">
        <div className="grid content-start gap-5">
          <Sessions page={page} onChanged={again} />
          <SecondFactor page={page} onChanged={again} />
          {tokens && <Tokens initial={tokens} timeZone={page.person.timeZone} />}
        </div>
        <div className="grid content-start gap-5">
          <Sheet id="password" title={accountWords.password}>
            <PasswordForm email={page.person.email} onChanged={again} />
          </Sheet>
          <Sheet id="email" title={accountWords.address}>
            <EmailForm email={page.person.email} />
          </Sheet>
        </div>
      </div>
    </>
  );
}
