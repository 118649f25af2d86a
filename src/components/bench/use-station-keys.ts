import { useEffect, useRef } from 'react';

/**
 * Keys of the station, wherever the focus is: `?` alone, letters with Alt. By the key's place, because Alt makes
 * other signs of letters on some keyboards.
 */
export function useStationKeys(actions: Record<string, () => unknown>): void {
  const newest = useRef(actions);
  useEffect(() => {
    newest.current = actions;
  });
  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent): void => {
      if (event.ctrlKey || event.metaKey || document.querySelector('dialog[open]') !== null) return;
      const inText = event.target instanceof HTMLTextAreaElement;
      const key =
        event.key === '?' && !inText ? '?' : event.altKey ? event.code.replace('Key', '').toLowerCase() : '';
      const act = newest.current[key];
      if (act === undefined) return;
      event.preventDefault();
      act();
    };
    document.addEventListener('keydown', onKeyDown);
    return () => document.removeEventListener('keydown', onKeyDown);
  }, []);
}
