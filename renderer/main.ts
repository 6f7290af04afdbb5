import { createApp } from 'vue';
import AppShell from './AppShell.vue';
import { makeRouter } from './router.ts';
import './styles/tokens.css';
import './styles/base.css';

createApp(AppShell).use(makeRouter()).mount('#app');
