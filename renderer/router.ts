import { createRouter, createWebHashHistory } from 'vue-router';
import type { Router } from 'vue-router';

/** Places of the window. Hash history: the same addresses work on both hosts and survive a reload. */
export function makeRouter(): Router {
  return createRouter({
    history: createWebHashHistory(),
    routes: [
      { path: '/', redirect: '/sections' },
      {
        path: '/sections',
        name: 'sections',
        component: () => import('./views/SectionsView.vue'),
        meta: { step: 'sections' },
      },
      {
        path: '/section/:sectionId',
        component: () => import('./views/SectionFrame.vue'),
        props: true,
        children: [
          {
            path: '',
            name: 'section',
            component: () => import('./views/SectionHome.vue'),
            meta: { step: 'sections' },
          },
          {
            path: 'intake',
            name: 'intake',
            component: () => import('./views/IntakeView.vue'),
            meta: { step: 'intake' },
          },
          {
            path: 'references',
            name: 'references',
            component: () => import('./views/ReferencesView.vue'),
            meta: { step: 'references' },
          },
          {
            path: 'review',
            name: 'review',
            component: () => import('./views/ReviewView.vue'),
            meta: { step: 'review' },
          },
          {
            path: 'export',
            name: 'export',
            component: () => import('./views/ExportView.vue'),
            meta: { step: 'export' },
          },
        ],
      },
      { path: '/:rest(.*)*', redirect: '/sections' },
    ],
  });
}
