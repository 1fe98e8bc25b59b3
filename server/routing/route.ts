import type { Request, RequestHandler, Response } from 'express'
import type { z } from 'zod'
import type { Permission } from '#shared/contracts/permissions.ts'
import type { ProblemCode } from '#shared/contracts/problems.ts'
import type { Actor, SignedIn } from '../actor.ts'
import type { AppContext } from '../context.ts'

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete'

/**
 * Who gets an answer: anyone; anyone, with the session looked at; whoever is signed in; or whoever has the
 * permission in the company that is active.
 */
export type Access = 'anyone' | 'visitor' | 'signed-in' | Permission

export type Caller<A extends Access> = A extends 'anyone'
  ? null
  : A extends 'visitor'
    ? SignedIn | Actor | null
    : A extends 'signed-in'
      ? SignedIn | Actor
      : Actor

type Parsed<Schema> = Schema extends z.ZodType ? z.output<Schema> : undefined

export interface Call<A extends Access, Params, Query, Body> {
  context: AppContext
  caller: Caller<A>
  params: Parsed<Params>
  query: Parsed<Query>
  body: Parsed<Body>
  request: Request
  response: Response
}

/** An answer that is JSON already, as the database wrote it. */
export class JsonText {
  constructor(readonly text: string) {}
}

export interface RouteSpec<
  A extends Access = Access,
  Params extends z.ZodType | undefined = z.ZodType | undefined,
  Query extends z.ZodType | undefined = z.ZodType | undefined,
  Body extends z.ZodType | undefined = z.ZodType | undefined,
> {
  method: Method
  /** such as /api/v1/rigs/:rigId */
  path: string
  access: A
  operationId: string
  summary: string
  params?: Params
  query?: Query
  body?: Body
  maxBodyBytes?: number
  /** a body that is a file of one of these content types, in place of JSON: the handler finds it as request.body */
  upload?: { types: readonly string[]; read: RequestHandler }
  /** 200 unless said */
  status?: number
  /** the shape of a JSON answer; absent where the answer has no body or is a file */
  answer?: z.ZodType
  /** the content type of an answer that is a file, which the handler sends by itself */
  file?: string
  /** refusals of its own, beside those every route of its kind may give */
  problems?: readonly ProblemCode[]
  /** before the body is read: a limit of its own */
  middleware?: (context: AppContext) => RequestHandler[]
  handle(call: Call<A, Params, Query, Body>): unknown
}

/** A route as data, which is mounted, guarded and described from this one declaration. */
export function defineRoute<
  A extends Access,
  Params extends z.ZodType | undefined = undefined,
  Query extends z.ZodType | undefined = undefined,
  Body extends z.ZodType | undefined = undefined,
>(spec: RouteSpec<A, Params, Query, Body>): RouteSpec {
  return spec as unknown as RouteSpec
}
