import { useEffect } from 'react';
import { useBlocker } from 'react-router-dom';
import { Button } from '../../../components/button';
import { Dialog } from '../../../components/dialog';

/** Asks before what is typed would be lost by leaving the page. */
export function LeaveGuard({ isOn }: { isOn: boolean }) {
  const blocker = useBlocker(({ currentLocation, nextLocation }) => isOn && currentLocation.pathname !== nextLocation.pathname);
  useEffect(() => {
    if (!isOn) return;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', warn);
    return () => window.removeEventListener('beforeunload', warn);
  }, [isOn]);
  const stay = () => blocker.reset?.();
  return (
    <Dialog
      isOpen={blocker.state === 'blocked'}
      onClose={stay}
      title="Leave what you have typed?"
      says="It is not saved yet. Stay to save it, or leave and lose it."
      actions={
        <>
          <Button kind="primary" onClick={stay}>Stay and go on</Button>
          <Button kind="danger" onClick={() => blocker.proceed?.()}>Leave and lose it</Button>
        </>
      }
    />
  );
}
