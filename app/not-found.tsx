import { Notice } from '@/components/public/notice';
import { ButtonLink } from '@/components/ui/button';

export default function NotFound() {
  return (
    <Notice
      title="There is no page here"
      action={
        <ButtonLink href="/" variant="ink">
          To the start
        </ButtonLink>
      }
    >
      The address may have been cut off on its way, or the page was never published. A report’s
      address ends with its own short name, as on the label.
    </Notice>
  );
}
