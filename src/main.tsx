import { createRoot } from 'react-dom/client';
import { App } from './app/app';
import './styles/main.css';

createRoot(document.getElementById('root')!).render(<App />);
