import './lib/zod-without-eval.js';
import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { Providers } from './app/providers.js';
import './styles/index.css';

createRoot(document.getElementById('root')!).render(<StrictMode><Providers /></StrictMode>);
