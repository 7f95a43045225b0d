import { isRouteErrorResponse, useNavigate, useRouteError } from 'react-router-dom';
import { Button, ButtonLink } from '../components/button';
import { Page } from '../components/page';
import { ApiError } from '../lib/api-client';

type Told = { title: string; detail: string; requestId: string };

function tell(error: unknown): Told {
  if (error instanceof ApiError) return { title: error.problem.title, detail: error.problem.detail, requestId: error.problem.instance };
  if (isRouteErrorResponse(error)) return { title: error.status === 404 ? 'There is nothing here' : 'This page cannot be shown', detail: 'The address may be mistyped, or what it named may be gone.', requestId: '' };
  if (error instanceof Error && /dynamically imported module|module script/i.test(error.message))
    return { title: 'This page could not be fetched', detail: 'The product may have been renewed since you opened it, or the network is down. Load the page again.', requestId: '' };
  return { title: 'Something went wrong in this page', detail: 'What was saved is kept. Load the page again; if it fails once more, tell your administrator what you did.', requestId: '' };
}

/** What went wrong, what to do, and the request id to quote when asking for help. */
export function RouteError() {
  const navigate = useNavigate();
  const { title, detail, requestId } = tell(useRouteError());
  return (
    <Page title={title}>
      <p className="max-w-[65ch] pt-6 text-lead">{detail}</p>
      {requestId && (
        <p className="pt-3 text-ink2">
          Request <code className="font-sans font-semibold text-ink select-all">{requestId}</code>: quote this when you ask for help.
        </p>
      )}
      <div className="flex flex-wrap gap-3 pt-6">
        <Button kind="primary" onClick={() => window.location.reload()}>
          Load the page again
        </Button>
        <Button onClick={() => void navigate(-1)}>Go back</Button>
        <ButtonLink to="/" kind="quiet">
          Go to the first page
        </ButtonLink>
      </div>
    </Page>
  );
}
