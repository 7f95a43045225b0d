import { roleWords } from '../../../../shared/permissions';
import type { Session } from '../../../../shared/schemas/people';
import { Icon } from '../../../components/icon';
import type { SignIn } from '../api';

/** One row a role: pressing it signs in. */
export function DemoSignIns({ people, isBusy, onChoose }: { people: Session['demoSignIns']; isBusy: boolean; onChoose: (input: SignIn) => void }) {
  return (
    <section aria-label="Demonstration sign-ins" className="pt-10">
      <h2 className="border-b border-edge pb-2 text-lead font-semibold">Look around as somebody</h2>
      <p className="py-3 text-ink2">This is a demonstration. The district, its people and everything that happens there are invented; one press signs in.</p>
      <ul className="border-t border-rule">
        {people.map((person) => (
          <li key={person.email} className="border-b border-rule">
            <button
              type="button"
              disabled={isBusy}
              onClick={() => onChoose({ email: person.email, password: person.password })}
              className="group flex min-h-14 w-full items-center gap-4 py-2.5 pr-2 text-left outline-offset-[-2px] hover:bg-sheet disabled:opacity-55"
            >
              <span className="w-40 shrink-0 border-r border-rule pr-4 font-semibold text-kingfisher group-hover:underline max-sm:w-28">{person.roles.map((role) => roleWords[role].title).join(' and ')}</span>
              <span className="min-w-0 flex-1">
                <span className="block">{person.name}</span>
                <span className="block text-note text-ink2">{person.roles.map((role) => roleWords[role].does).join('; ')}</span>
              </span>
              <Icon name="right" className="size-4 text-ink2" />
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}
