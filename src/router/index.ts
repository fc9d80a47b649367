import { createRouter, createWebHistory } from 'vue-router'
import { routes } from './routes.ts'

export const makeRouter = () =>
  createRouter({
    history: createWebHistory(),
    routes,
    scrollBehavior: (to, from, saved) => {
      if (saved) return saved
      if (to.hash) return { el: to.hash, top: 80 }
      return to.path === from.path ? false : { top: 0 }
    },
  })
