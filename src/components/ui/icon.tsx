import type { LucideIcon } from 'lucide-react';

interface Props {
  icon: LucideIcon;
  size?: number;
  className?: string;
}

/** A lucide icon at the house stroke; always beside a word or inside a labelled button. */
export function Icon({ icon: Drawn, size = 15, className }: Props) {
  return (
    <Drawn size={size} strokeWidth={1.6} aria-hidden className={`shrink-0 ${className ?? ''}`} />
  );
}
