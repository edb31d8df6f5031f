import type { RouteRecordRaw } from 'vue-router'

export const weighRoutes: RouteRecordRaw[] = [
  { path: '/weigh', name: 'weigh', component: () => import('@/views/weigh/WeighView.vue'), meta: { title: 'Weigh' } },
  {
    path: '/weigh/file',
    name: 'weigh-file',
    component: () => import('@/views/weigh/FileView.vue'),
    meta: { title: 'Take a balance file' },
  },
  {
    path: '/weigh/samples/:sampleId',
    name: 'weigh-sample',
    component: () => import('@/views/weigh/SampleView.vue'),
    props: true,
    meta: { title: 'Sample', isStation: true },
  },
]
