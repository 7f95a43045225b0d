import { ButtonLink } from '../components/button';
import { Page } from '../components/page';

export function NotFoundPage() {
  return (
    <Page title="There is nothing here">
      <p className="max-w-[65ch] pt-6 text-lead">The address may be mistyped, or what it named may have been taken away.</p>
      <div className="flex flex-wrap gap-3 pt-6">
        <ButtonLink to="/" kind="primary">
          Go to the first page
        </ButtonLink>
      </div>
    </Page>
  );
}
