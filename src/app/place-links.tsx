import { Link, useLocation } from 'react-router-dom';
import type { Role } from '../../shared/permissions';
import { Menu, type MenuPart } from '../components/menu';
import { incidentPlaces, isAt, officePlaces, openTo, registerPlaces, type Place } from './places';

const linkClass = 'inline-flex h-full min-h-11 items-center border-b-3 px-3 text-body no-underline hover:text-kingfisher';
const here = 'border-kingfisher font-semibold text-ink';
const elsewhere = 'border-transparent text-ink2';

/** Links to the places this person may see: in a row where there is room, in one menu where there is not. */
export function PlaceLinks({ roles }: { roles: readonly Role[] }) {
  const { pathname } = useLocation();
  const groups = [
    { heading: 'Incidents', places: openTo(incidentPlaces, roles) },
    { heading: 'Registers', places: openTo(registerPlaces, roles) },
    { heading: 'Office', places: openTo(officePlaces, roles) },
  ].filter((group) => group.places.length > 0);
  const parts: MenuPart[] = groups.map(({ heading, places }) => ({ heading, entries: places.map((place) => ({ label: place.label, to: place.to, isChosen: isAt(place, pathname) })) }));
  const [first, ...rest] = groups;
  return (
    <nav aria-label="Places" className="h-full">
      <div className="hidden h-full items-stretch lg:flex">
        {first?.places.map((place) => <PlaceLink key={place.to} place={place} isHere={isAt(place, pathname)} />)}
        {rest.map(({ heading, places }) => (
          <PlaceMenu key={heading} heading={heading} places={places} pathname={pathname} />
        ))}
      </div>
      <div className="flex h-full items-center lg:hidden">
        <Menu label="Places" icon="places" kind="quiet" hasArrow={false} parts={parts} />
      </div>
    </nav>
  );
}

function PlaceLink({ place, isHere }: { place: Place; isHere: boolean }) {
  return (
    <Link to={place.to} aria-current={isHere ? 'page' : undefined} className={`${linkClass} ${isHere ? here : elsewhere}`}>
      {place.label}
    </Link>
  );
}

function PlaceMenu({ heading, places, pathname }: { heading: string; places: Place[]; pathname: string }) {
  const current = places.find((place) => isAt(place, pathname));
  return (
    <div className={`flex items-center border-b-3 ${current ? here : elsewhere}`}>
      <Menu label={current ? `${heading}: ${current.label}` : heading} kind="quiet" buttonClassName={`gap-1! px-3! ${current ? 'text-ink!' : 'font-normal! text-ink2!'}`} entries={places.map((place) => ({ label: place.label, to: place.to, isChosen: place === current }))} />
    </div>
  );
}
