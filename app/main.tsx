import { createRoot } from 'react-dom/client';
import './index.css';
import { applyRamps } from './components/images/colour-maps';
import { applyTheme, watchSystemTheme } from './lib/theme';
import { Providers } from './providers';
import { router } from './router';

applyTheme();
watchSystemTheme();
applyRamps();

const root = document.getElementById('root');
if (!root) throw new Error('index.html has no element with the id root.');
createRoot(root).render(<Providers router={router} />);
