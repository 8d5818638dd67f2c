import { ArrowLeft, ArrowRight } from 'lucide-react';
import { useMemo } from 'react';
import { useNavigate, useLocation } from 'react-router-dom';
import type { HoleRow } from '#contract/holes.ts';
import { Button, LinkButton } from '#src/components/ui/button.tsx';
import { useCommands } from '#src/lib/commands.ts';
import { holePath, holesPath } from '../hole-path.ts';

interface Props {
  depositId: number;
  holes: readonly HoleRow[];
  hole: string;
}

/** To the hole before and after in the list, keeping what is shown; also by the keys [ and ]. */
export function HoleSteps({ depositId, holes, hole }: Props) {
  const navigate = useNavigate();
  const { search } = useLocation();
  const place = holes.findIndex((row) => row.hole === hole);
  const before = place > 0 ? holes[place - 1]?.hole : undefined;
  const after = place < 0 ? undefined : holes[place + 1]?.hole;
  useCommands(
    useMemo(() => {
      const step = (id: string, label: string, keys: string, name: string | undefined) =>
        name === undefined ? [] : [{ id, label: `${label}, ${name}`, group: 'Holes', keys, run: () => void navigate(`${holePath(depositId, name)}${search}`) }];
      return [...step('hole-before', 'Hole before', '[', before), ...step('hole-after', 'Hole after', ']', after)];
    }, [before, after, depositId, navigate, search]),
  );
  return (
    <>
      <LinkButton to={holesPath(depositId)} kind="bare">All holes</LinkButton>
      {before === undefined ? <Button icon={ArrowLeft} unavailable="This is the first hole">First</Button> : <LinkButton to={`${holePath(depositId, before)}${search}`} icon={ArrowLeft}>{before}</LinkButton>}
      {after === undefined ? <Button icon={ArrowRight} unavailable="This is the last hole">Last</Button> : <LinkButton to={`${holePath(depositId, after)}${search}`} icon={ArrowRight}>{after}</LinkButton>}
    </>
  );
}
