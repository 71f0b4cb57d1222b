import { useEffect, useState, type ReactNode } from 'react';
import { Sheet } from '@/components/ui/overlay';

/** A sheet over the table: wide, between numbers strip and trough over the margin column; on a phone under the grid's upper half. */
export function TableSheet(props: {
  title: string;
  onClose: () => void;
  children: ReactNode;
  foot?: ReactNode;
  lead?: ReactNode;
  note?: string;
}) {
  const [place, setPlace] = useState(placeOf);
  useEffect(() => {
    const measure = () => setPlace(placeOf());
    window.addEventListener('resize', measure);
    return () => window.removeEventListener('resize', measure);
  }, []);
  const { lead, note, ...rest } = props;
  return <Sheet {...rest} {...place} lit width={444} {...(lead ? { lead } : {})} {...(note ? { note } : {})} />;
}

function placeOf(): { top: number; bottom: number } {
  const box = document.getElementById('table')?.getBoundingClientRect();
  return box ? { top: box.top, bottom: Math.max(0, window.innerHeight - box.bottom) } : { top: 0, bottom: 0 };
}
