import type { LucideIcon } from 'lucide-react';
import { NavLink } from 'react-router-dom';
import { Icon } from '#src/components/ui/icon.tsx';

export interface Place {
  to: string;
  label: string;
  icon: LucideIcon;
  isExact?: boolean;
}

/** Four places for the thumb, on phones only. */
export function BottomBar({ places }: { places: readonly Place[] }) {
  return (
    <nav
      aria-label="Sections"
      className="fixed inset-x-0 bottom-0 z-20 grid border-t border-rule-firm bg-sheet pb-[env(safe-area-inset-bottom)] md:hidden"
      style={{ gridTemplateColumns: `repeat(${places.length}, 1fr)` }}
    >
      {places.map(({ to, label, icon, isExact }) => (
        <NavLink
          key={to}
          to={to}
          end={isExact ?? false}
          className="grid justify-items-center gap-px pt-[7px] pb-2 text-caption font-medium text-ink-2 no-underline focus-visible:-outline-offset-2 aria-[current=page]:text-copper aria-[current=page]:shadow-[inset_0_3px_0_var(--copper)]"
        >
          <Icon icon={icon} size={20} />
          {label}
        </NavLink>
      ))}
    </nav>
  );
}
