/** Asks a demo server as Ines Okoro, an author; refuses what was refused. */
export async function signInAsInes(address: string) {
  const headers: Record<string, string> = { Origin: address, 'Content-Type': 'application/json' };
  const ask = async (method: 'GET' | 'POST', url: string, body?: object) => {
    const answer = await fetch(`${address}/api/v1${url}`, { method, headers, body: body && JSON.stringify(body) });
    headers.Cookie ??= answer.headers.get('set-cookie')?.split(';', 1)[0] ?? '';
    if (!answer.ok) throw new Error(`${method} ${url}: ${answer.status} ${await answer.text()}`);
    return (await answer.json()) as never;
  };
  const { people }: { people: { personId: string; name: string }[] } = await ask('GET', '/auth/demo-people');
  delete headers.Cookie;
  await ask('POST', '/auth/demo-sign-in', { personId: people.find(({ name }) => name === 'Ines Okoro')!.personId });
  return ask;
}
