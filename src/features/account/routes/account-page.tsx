import { roleWords } from '../../../../shared/permissions';
import { Page, Section } from '../../../components/page';
import { RuledList, RuledRow } from '../../../components/ruled-list';
import { useSession } from '../../../lib/session';
import { ChangePassword } from '../components/change-password';
import { EndSessions } from '../components/end-sessions';

/** One's own account: what one may do, the password, the sessions. */
export function AccountPage() {
  const session = useSession();
  if (!session?.person) return null;
  const { name, email, roles } = session.person;
  return (
    <Page title={name} tabTitle="Your account" above="Your account" below={email}>
      <Section title="Roles" note="given by the administrator">
        <RuledList label="Your roles">
          {roles.map((role) => (
            <RuledRow key={role} lead={<span className="font-semibold text-ink">{roleWords[role].title}</span>}>
              {roleWords[role].does}
            </RuledRow>
          ))}
        </RuledList>
      </Section>
      <Section title="Password">
        <ChangePassword email={email} />
      </Section>
      <Section title="Sessions">
        <EndSessions />
      </Section>
      <Section title="This installation">
        <p className="pt-4 text-ink2">
          {session.organisation}. Downreach {session.productVersion}, engine {session.engineVersion}. Times are shown in UTC{session.utcOffset} unless an incident sets another offset.
        </p>
      </Section>
    </Page>
  );
}
