/** The sign-in cookie's name, known to the web process and the websocket server. Over https it is bound to the host. */
export function sessionCookieName(publicUrl: string): string {
  return publicUrl.startsWith('https:') ? '__Host-motebook-session' : 'motebook-session';
}

/** A login ends after this long without a request, and after `LOGIN_TOTAL_HOURS` in any case. */
export const LOGIN_IDLE_MINUTES = 60;
export const LOGIN_TOTAL_HOURS = 24;
