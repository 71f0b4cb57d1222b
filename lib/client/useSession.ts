import { useQueryClient } from '@tanstack/react-query';
import { createContext, useContext } from 'react';
import { demoSignIn, getSession, signIn, signOut, type Me } from '@/lib/contracts/auth';
import type { Right } from '@/lib/contracts/common';
import { keyOf, useAct, useApi } from './useApi';

/** Who is signed in and what this installation is. Asked again each minute, so that an ended session shows. */
export function useSession() {
  return useApi(getSession, {}, { staleTime: 30_000, refetchInterval: 60_000 });
}

/** The person whose pages these are: kept while a lost session is being renewed. */
export const MeContext = createContext<Me | null>(null);

/** For pages behind the session gate. */
export function useMe(): Me {
  const me = useContext(MeContext);
  if (!me) throw new Error('useMe is for pages behind the session gate');
  return me;
}

export function useMay(right: Right): boolean {
  return useMe().rights.includes(right);
}

/** Signing in, out and over; each throws away what the person before could see. */
export function useSignIn(onDone: () => void) {
  const queries = useQueryClient();
  const forget = () => {
    queries.removeQueries({ predicate: (query) => query.queryKey[0] !== getSession.name });
    void queries.invalidateQueries({ queryKey: keyOf(getSession) }).then(onDone);
  };
  return {
    byPassword: useAct(signIn, [], forget),
    asDemo: useAct(demoSignIn, [], forget),
    out: useAct(signOut, [], forget),
  };
}
