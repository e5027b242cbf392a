import type { ValueTransformer } from 'typeorm';

/** MariaDB keeps truth values as TINYINT. */
export const asBoolean: ValueTransformer = {
  to: (value: boolean) => (value ? 1 : 0),
  from: (value: number) => value === 1,
};
