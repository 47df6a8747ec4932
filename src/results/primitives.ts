import { z } from 'zod';

export const number = z.number();
export const optionalNumber = z.number().nullable();
/** Rows of a matrix. */
export const matrix = z.array(z.array(z.number()));
export const interval = z.tuple([number, number]).nullable();

const both = <T extends z.ZodType>(inner: T) => z.object({ marginalised: inner, fixed: inner });
/** Something for every parameter, marginalised and fixed. */
export const perParameter = <T extends z.ZodType>(inner: T) => z.record(z.string(), both(inner));
