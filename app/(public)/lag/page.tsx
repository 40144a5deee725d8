import type { Metadata } from 'next';
import { TimingScreen } from '@/components/lag/timing-screen';

export const metadata: Metadata = {
  title: 'Timing page',
  description: 'A running clock that tells a camera’s shutter lag from photographs of it.',
};

export default function LagPage() {
  return <TimingScreen />;
}
