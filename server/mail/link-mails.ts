export type MailText = { subject: string; text: string };
/** Times come with their offset, as 2031-05-12T08:55:00-08:00. */
type LinkMail = { organisation: string; name: string; url: string; expiresAt: string };

const LINK_PATH = '/set-password/';

export const linkUrl = (publicUrl: string, token: string): string => `${publicUrl.replace(/\/+$/, '')}${LINK_PATH}${token}`;

/** The text without the working part of its one-time links. */
export const withoutLinkTokens = (text: string): string => text.replace(/(\/set-password\/)[\w-]+/g, '$1(taken out)');

const clock = (iso: string): string => `${iso.slice(0, 10)} ${iso.slice(11, 16)} (UTC${iso.slice(19)})`;

export const invitationMail = ({ organisation, name, url, expiresAt, by }: LinkMail & { by: string }): MailText => ({
  subject: `Your access to Downreach, ${organisation}`,
  text: `${name},

${by} has given you access to Downreach at ${organisation}.
Choose your password here, once, until ${clock(expiresAt)}:

${url}

If the link has run out, ask for a new one on the sign-in page under "Forgotten password".
`,
});

export const resetMail = ({ organisation, name, url, expiresAt }: LinkMail): MailText => ({
  subject: `New password for Downreach, ${organisation}`,
  text: `${name},

somebody asked for a new password for your access to Downreach at ${organisation}.
Choose it here, once, until ${clock(expiresAt)}:

${url}

If it was not you, do nothing: your password stays as it is.
`,
});

export const passwordChangedMail = ({ organisation, name, at }: { organisation: string; name: string; at: string }): MailText => ({
  subject: `Your password for Downreach was changed, ${organisation}`,
  text: `${name},

your password for Downreach at ${organisation} was changed on ${clock(at)}. Every other session of yours has ended.
If it was not you, tell your administrator at once.
`,
});
