import type { AstroCookies } from 'astro';

const DAY_SECONDS = 24 * 60 * 60;
export const SESSION_HOURS = 12;
export const STATION_DAYS = 90;

/** `__Host-` needs https; on loopback http the plain name serves. */
function cookieName(name: 'session' | 'station', url: URL): string {
  return url.protocol === 'https:' ? `__Host-${name}` : name;
}

export function readCookie(cookies: AstroCookies, name: 'session' | 'station', url: URL): string | undefined {
  return cookies.get(cookieName(name, url))?.value;
}

export function setCookie(cookies: AstroCookies, name: 'session' | 'station', url: URL, value: string): void {
  cookies.set(cookieName(name, url), value, {
    httpOnly: true,
    sameSite: 'lax',
    secure: url.protocol === 'https:',
    path: '/',
    maxAge: name === 'session' ? SESSION_HOURS * 3600 : STATION_DAYS * DAY_SECONDS,
  });
}

export function clearCookie(cookies: AstroCookies, name: 'session' | 'station', url: URL): void {
  cookies.delete(cookieName(name, url), { path: '/' });
}
