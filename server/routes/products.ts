import { z } from 'zod'
import { SiteQuery } from '#shared/schemas/master-fields.ts'
import { CreateProduct, ProductAnswer, ProductId, UpdateProduct } from '#shared/schemas/products.ts'
import { endpoint } from '../http/endpoint.ts'
import { createProduct, listProducts, updateProduct } from '../services/masters/products.ts'

/** Products: target, specification, claims, acceptance standards. */
export const productEndpoints = [
  endpoint({
    method: 'get',
    path: '/products',
    summary: 'Products of your sites',
    allow: 'record:read',
    query: SiteQuery,
    answer: { status: 200, schema: z.array(ProductAnswer) },
    problems: [404],
    handle: ({ actor, query }) => listProducts(actor, query),
  }),
  endpoint({
    method: 'post',
    path: '/products',
    summary: 'Add a product',
    allow: 'product:write',
    idempotent: true,
    body: CreateProduct,
    answer: { status: 201, schema: ProductAnswer },
    problems: [404, 409],
    handle: ({ actor, body }) => createProduct(actor, body),
  }),
  endpoint({
    method: 'put',
    path: '/products/:productId',
    summary: 'Change a product',
    allow: 'product:write',
    params: ProductId,
    body: UpdateProduct,
    answer: { status: 200, schema: ProductAnswer },
    problems: [404, 409],
    handle: ({ actor, params, body }) => updateProduct(actor, params.productId, body),
  }),
]
