import { createHmac } from 'node:crypto'
import { lookup, type LookupAddress } from 'node:dns'
import { request as requestPlain } from 'node:http'
import { request as requestSecure } from 'node:https'
import { BlockList, isIP, type LookupFunction } from 'node:net'

/** A message to be posted to a webhook. */
export interface WebhookMessage {
  id: string
  url: string
  /** `whsec_` and the key in base64 */
  secret: string
  body: string
}

/** How a message is posted. */
export interface PostingRules {
  /** Whether addresses of the operator's own network may be reached */
  privateAddresses: boolean
  /** ms for everything from the name's look-up to the answer's head */
  timeout: number
}

/** Address blocks that are not for the public internet (IANA special-purpose address registries). */
const notPublic = new BlockList()
for (const [net, prefix] of [
  ['0.0.0.0', 8],
  ['10.0.0.0', 8],
  ['100.64.0.0', 10],
  ['127.0.0.0', 8],
  ['169.254.0.0', 16],
  ['172.16.0.0', 12],
  ['192.0.0.0', 24],
  ['192.0.2.0', 24],
  ['192.168.0.0', 16],
  ['198.18.0.0', 15],
  ['198.51.100.0', 24],
  ['203.0.113.0', 24],
  ['224.0.0.0', 3],
] as const) {
  notPublic.addSubnet(net, prefix, 'ipv4')
}
const globalUnicast = new BlockList()
globalUnicast.addSubnet('2000::', 3, 'ipv6')
for (const [net, prefix] of [
  ['2001::', 23],
  ['2001:db8::', 32],
  ['2002::', 16], // leads to any IPv4 address
] as const) {
  notPublic.addSubnet(net, prefix, 'ipv6')
}

/** Whether an address belongs to the public internet. */
export function isPublicAddress(address: string): boolean {
  if (isIP(address) === 6) {
    return globalUnicast.check(address, 'ipv6') && !notPublic.check(address, 'ipv6')
  }
  return isIP(address) === 4 && !notPublic.check(address, 'ipv4')
}

/**
 * The signature of a message: HMAC-SHA256 over id, timestamp and body
 * (Standard Webhooks specification, "Signature scheme"). `timestamp` in s since 1970 UTC.
 */
export function signature(message: WebhookMessage, timestamp: number): string {
  const key = Buffer.from(message.secret.slice('whsec_'.length), 'base64')
  const signed = `${message.id}.${timestamp}.${message.body}`
  return `v1,${createHmac('sha256', key).update(signed).digest('base64')}`
}

/**
 * Posts a message and answers with the status it got. Redirects are not followed.
 * @throws Error where nothing answers in time, or the address is not allowed
 */
export function postWebhook(message: WebhookMessage, rules: PostingRules): Promise<number> {
  return new Promise((answered, failed) => {
    const url = new URL(message.url)
    const host = url.hostname.replace(/^\[|\]$/g, '')
    if (isIP(host) !== 0 && !rules.privateAddresses && !isPublicAddress(host)) {
      failed(notAllowed(host))
      return
    }
    const timestamp = Math.floor(Date.now() / 1000)
    const post = url.protocol === 'https:' ? requestSecure : requestPlain
    const request = post(url, {
      method: 'POST',
      agent: false,
      ...(rules.privateAddresses ? {} : { lookup: lookupPublic }),
      signal: AbortSignal.timeout(rules.timeout),
      headers: {
        'content-type': 'application/json',
        'content-length': Buffer.byteLength(message.body),
        'user-agent': 'Driftbook',
        'webhook-id': message.id,
        'webhook-timestamp': timestamp,
        'webhook-signature': signature(message, timestamp),
      },
    })
    request.on('error', (error) => {
      failed(error.name === 'AbortError' ? new Error(`no answer in ${rules.timeout} ms`) : error)
    })
    request.on('response', (response) => {
      answered(response.statusCode ?? 0)
      response.destroy() // nobody reads the body
    })
    request.end(message.body)
  })
}

/** Looks a name up for the connection itself, so that what is checked is what is connected to. */
const lookupPublic: LookupFunction = (hostname, options, callback) => {
  lookup(hostname, { ...options, all: true }, (error, addresses: LookupAddress[]) => {
    const refused = addresses.find(({ address }) => !isPublicAddress(address))
    if (error) callback(error, '', 0)
    else if (refused) callback(notAllowed(refused.address), '', 0)
    else if (options.all) callback(null, addresses)
    else callback(null, addresses[0].address, addresses[0].family)
  })
}

function notAllowed(address: string): Error {
  return new Error(`${address} is no public address: WEBHOOKS=on would allow it`)
}
