import type { Column, Table } from '@/openapi/core/table'

/** A column together with how its cell is read from a row's object. */
export interface Field<T> extends Column {
  read: (row: T) => string | number | boolean | null | undefined
}

type Read<T, V> = (row: T) => V | null | undefined

export const text = <T>(name: string, description: string, read: Read<T, string>): Field<T> => ({ name, type: 'text', unit: null, description, read })
export const integer = <T>(name: string, description: string, read: Read<T, number>): Field<T> => ({ name, type: 'integer', unit: null, description, read })
export const flag = <T>(name: string, description: string, read: Read<T, boolean>): Field<T> => ({ name, type: 'boolean', unit: null, description, read })
export const number = <T>(name: string, unit: string | null, description: string, read: Read<T, number>): Field<T> => ({ name, type: 'number', unit, description, read })

/** A table whose cells are read from objects as they are asked for; NDJSON gets the objects themselves. */
export function tableOf<T>(name: string, fields: readonly Field<T>[], items: Iterable<T>): Table {
  return {
    name,
    columns: fields.map(({ name: column, type, unit, description }) => ({ name: column, type, unit, description })),
    rows: {
      *[Symbol.iterator]() {
        for (const item of items) yield fields.map((field) => field.read(item) ?? null)
      },
    },
    items,
  }
}
