'use client'

import { useEffect, useImperativeHandle, useRef } from 'react'
import type { Ref, RefObject } from 'react'
import type { PairLayout } from './pair-layout'
import type { PairModel } from './pair-model'
import type { PairHandle, PairProps } from './pair-types'
import { createPairView } from './pair-view'
import type { PairView } from './pair-view'

/** Keeps a view in step with a component's life: made once, given each render's props, ended with it. */
export function usePairView(
  root: RefObject<HTMLDivElement | null>,
  props: PairProps,
  handle: Ref<PairHandle> | undefined,
  onLayout: (layout: PairLayout, model: PairModel) => void,
): RefObject<PairView | null> {
  const view = useRef<PairView | null>(null)
  const latest = useRef({ props, onLayout })

  useEffect(() => {
    latest.current = { props, onLayout }
    view.current?.setProps(props)
  }, [props, onLayout])

  useEffect(() => {
    if (root.current === null) return
    const made = createPairView(root.current, latest.current.props)
    made.onLayout((layout, model) => latest.current.onLayout(layout, model))
    view.current = made
    return () => {
      made.destroy()
      view.current = null
    }
  }, [root])

  useImperativeHandle(handle, () => ({
    push: (readings) => view.current?.push(readings),
    pushWood: (column) => view.current?.pushWood(column),
    setNow: (nowS) => view.current?.setNow(nowS),
    setFuture: (future) => view.current?.setFuture(future),
  }))

  return view
}
