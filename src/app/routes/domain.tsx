import { useParams } from 'react-router-dom';
import { AnalysisTray } from '#src/app/shell/analysis-tray.tsx';
import { DomainPage } from '#src/features/domains/components/domain-page.tsx';

export function DomainRoute() {
  const domainId = Number(useParams()['domainId']);
  return (
    <>
      <DomainPage key={domainId} domainId={domainId} />
      <AnalysisTray />
    </>
  );
}
