import { render } from 'preact';
import { Page } from './page.tsx';
import './style.css';

const root = document.getElementById('page');
if (root) render(<Page />, root);
