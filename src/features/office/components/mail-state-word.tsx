import { StatusWord, type StatusTone } from '../../../components/status-word';
import type { MailState } from '../api';

export const mailStateWords: Record<MailState, { word: string; tone: StatusTone }> = {
  queued: { word: 'waiting', tone: 'active' },
  sent: { word: 'sent', tone: 'good' },
  failed: { word: 'failed', tone: 'bad' },
  local: { word: 'kept here', tone: 'neutral' },
};

export const MailStateWord = ({ state }: { state: MailState }) => <StatusWord tone={mailStateWords[state].tone}>{mailStateWords[state].word}</StatusWord>;
