import { createContext, useContext, useState, type ReactNode } from 'react';
import { createPortal } from 'react-dom';

/** Places of the shell that a page fills: the selection card at the right, the core tray at the foot. */
interface Slots {
  card: HTMLElement | null;
  tray: HTMLElement | null;
  setCard: (element: HTMLElement | null) => void;
  setTray: (element: HTMLElement | null) => void;
}

const SlotContext = createContext<Slots | null>(null);

export function SlotProvider({ children }: { children: ReactNode }) {
  const [card, setCard] = useState<HTMLElement | null>(null);
  const [tray, setTray] = useState<HTMLElement | null>(null);
  return <SlotContext value={{ card, tray, setCard, setTray }}>{children}</SlotContext>;
}

function useSlots(): Slots {
  const slots = useContext(SlotContext);
  if (!slots) throw new Error('Expected a SlotProvider above');
  return slots;
}

/** The shell's own side: an empty place takes no room. */
export function CardPlace({ className }: { className: string }) {
  const { setCard } = useSlots();
  return <div ref={setCard} className={`empty:hidden ${className}`} />;
}

export function TrayPlace({ className }: { className: string }) {
  const { setTray } = useSlots();
  return <div ref={setTray} className={`empty:hidden ${className}`} />;
}

/** Shows its children in the card's place. Render it only while something is selected. */
export function CardSlot({ children }: { children: ReactNode }) {
  const { card } = useSlots();
  return card && createPortal(children, card);
}

/** Puts a whole tray in its place; `TraySlot` is the tray itself. */
export function TrayPortal({ children }: { children: ReactNode }) {
  const { tray } = useSlots();
  return tray && createPortal(children, tray);
}
