/// <reference types="vite/client" />

// For ESLint's type-aware rules alone; vue-tsc reads the real files.
declare module '*.vue' {
  import type { DefineComponent } from 'vue'
  const component: DefineComponent<object, object, unknown>
  export default component
}
