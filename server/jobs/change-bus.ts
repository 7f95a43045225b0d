import { EventEmitter } from 'node:events';
import type { ChangeEvent } from '../../shared/schemas/incidents';

/** Tells open pages what changed. Announce after the transaction, never inside it. */
export class ChangeBus {
  private readonly emitter = new EventEmitter().setMaxListeners(0);

  announce(event: ChangeEvent): void {
    this.emitter.emit('change', event);
  }

  subscribe(listener: (event: ChangeEvent) => void): () => void {
    this.emitter.on('change', listener);
    return () => this.emitter.off('change', listener);
  }
}
