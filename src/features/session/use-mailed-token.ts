import { useState } from 'react';
import { useLocation, useSearchParams } from 'react-router-dom';

/** The token of a mailed link, from the fragment (which no server logs) or the query. Kept while the page is open. */
export function useMailedToken(): string {
  const [search] = useSearchParams();
  const { hash } = useLocation();
  const [token] = useState(() => new URLSearchParams(hash.slice(1)).get('token') ?? search.get('token') ?? '');
  return token;
}
