/** What to say beside which field, when somebody has the login name or the address already. */
export function whatIsTaken(
  taken: readonly { login: string }[],
  given: { login: string; email: string },
): Record<string, string> {
  const login = taken.some((one) => one.login === given.login);
  return login
    ? {
        login: `Somebody has the login name ${given.login}; it is never given to anybody else. Choose another.`,
      }
    : { email: `Somebody has the address ${given.email}. One person has one account.` };
}
