import type { RouteRecordRaw } from 'vue-router'

export const reviewRoutes: RouteRecordRaw[] = [
  {
    path: '/review/mail',
    name: 'review-mail',
    component: () => import('@/views/review/CaughtMailView.vue'),
    meta: { title: 'Caught mail' },
  },
  {
    path: '/review/:week(\\d{4}-W\\d{2})?',
    name: 'review',
    component: () => import('@/views/review/ReviewView.vue'),
    props: true,
    meta: { title: 'Review' },
  },
]
