import { mount } from 'svelte';
import App from './App.svelte';
import './style/tokens.css';
import './style/base.css';

const target = document.getElementById('app');
if (!target) throw new Error('index.html: expected an element with the id app');
mount(App, { target });
