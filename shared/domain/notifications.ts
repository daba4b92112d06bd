/** What the site writes to an account about, and whether it does so unless told otherwise. */
export const notificationKinds = ['review-waiting', 'verdict', 'note', 'run-ended'] as const;
export type NotificationKind = (typeof notificationKinds)[number];
export type NotificationSettings = Record<NotificationKind, boolean>;

export const notificationNames: Record<NotificationKind, { name: string; line: string }> = {
  'review-waiting': { name: 'A table waits for a reviewer', line: 'for reviewers, from groups other than their own' },
  verdict: { name: 'A verdict on your work', line: 'signed off, reservation, returned, declined' },
  note: { name: 'A note on your run', line: 'from a reviewer or a member' },
  'run-ended': { name: 'Your run ends or stops', line: '' },
};

export const defaultNotifications: NotificationSettings = {
  'review-waiting': true,
  verdict: true,
  note: true,
  'run-ended': true,
};
