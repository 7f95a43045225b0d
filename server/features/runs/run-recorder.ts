import { setTimeout as pause } from 'node:timers/promises';
import { type StreamHead, writeMessage } from '../../../shared/frames';

export type RunProgress = { stage: string; done: number; of: number };
type Batch = { firstPosition: number; messages: Uint8Array[]; progress: RunProgress | null };

/** Pages are told a few times a second at most. */
const PAUSE_MS = 250;

/**
 * Collects what a solve sends and hands it on in batches: the first at once, the next ones a few times a second.
 * `store` answers false when the run takes no more (it was cancelled).
 */
export class RunRecorder {
  /** Positions of messages that the final result repeats in full. */
  readonly passing: number[] = [];
  private messages: Uint8Array[] = [];
  private progress: RunProgress | null = null;
  private position = 0;
  private isChanged = false;
  private isOpen = true;
  private readonly finishing = new AbortController();
  private flushing: Promise<void> | null = null;

  constructor(private readonly store: (batch: Batch) => Promise<boolean>, private readonly onLost: (error: unknown) => void) {}

  add(head: StreamHead, payload: Uint8Array): void {
    if (!this.isOpen || head.type === 'result' || head.type === 'failed') return;
    if (head.type === 'progress') this.progress = { stage: head.stage, done: head.done, of: head.of };
    else {
      if (head.type === 'receptor') this.passing.push(this.position + this.messages.length);
      this.messages.push(writeMessage(head, payload));
    }
    this.isChanged = true;
    this.flushing ??= this.flush().catch((error: unknown) => {
      this.isOpen = false;
      this.onLost(error);
    });
  }

  /** Stores what is left, without waiting. */
  async finish(): Promise<void> {
    this.finishing.abort();
    await this.flushing;
  }

  private async flush(): Promise<void> {
    while (this.isChanged && this.isOpen) {
      this.isChanged = false;
      const messages = this.messages;
      this.messages = [];
      const firstPosition = this.position;
      this.position += messages.length;
      this.isOpen = await this.store({ firstPosition, messages, progress: this.progress });
      await pause(PAUSE_MS, undefined, { signal: this.finishing.signal }).catch(() => undefined);
    }
    this.flushing = null;
  }
}
