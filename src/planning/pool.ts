import { availableParallelism } from 'node:os'
import { Piscina } from 'piscina'
import { NotFlyable } from '../physics/notFlyable.ts'
import { type FlightPlan } from '../physics/flight.ts'
import { BadSounding } from '../soundings/badSounding.ts'
import { type Sounding } from '../soundings/profile.ts'
import { type ReadOptions } from '../soundings/readSoundings.ts'
import { recipeKey, type AirRecipe } from './airRecipe.ts'
import { MEMBER_VALUES } from './memberFlights.ts'
import {
  AIR_MISSING,
  type AirOrder,
  type MemberOrder,
  type ReadOrder,
  type Refused,
  type Summary,
  type SummaryOrder,
  type SurveyOrder,
  type Unread,
} from './planningWorker.ts'
import { type Region } from './regions.ts'
import { type Spread } from './spread.ts'
import { type Survey, type SurveyedTime } from './survey.ts'

/** Members that one task flies: some 10 ms, so that small dispersions pass between those of large ones. */
const MEMBERS_PER_TASK = 512

/** How far a long piece of work has come, 0 to 1. */
export type Progress = (share: number) => void

/** What a dispersion is made of. */
export interface DispersionOrder {
  plan: FlightPlan
  air: AirRecipe
  spread: Spread
  members: number
  seed: number
  regions: readonly Region[]
}

/** The spread is so wide that none of the members flew. */
export class NoMemberFlies extends Error {
  constructor() {
    super('no member of the dispersion flies')
    this.name = 'NoMemberFlies'
  }
}

/** Threads that plan, so that the event loop is free to answer. */
export class PlanningPool {
  private readonly threads: number
  private piscina: Piscina | undefined

  /** The threads start with the first work, or with `warmUp`. */
  constructor(threads = availableParallelism()) {
    this.threads = threads
  }

  /** Starts the threads and lets each compile what it will run. */
  async warmUp(order: DispersionOrder): Promise<void> {
    await this.disperse({ ...order, members: 2 * MEMBERS_PER_TASK * this.threads })
  }

  /**
   * Flies and sums up a dispersion.
   * @throws NotFlyable where the plan itself does not fly, NoMemberFlies where none does, and the signal's reason once it is aborted
   */
  async disperse(
    order: DispersionOrder,
    signal?: AbortSignal,
    progress?: Progress,
  ): Promise<Summary> {
    const { plan, air, spread, members, seed, regions } = order
    const rows = new SharedArrayBuffer(members * MEMBER_VALUES * Float64Array.BYTES_PER_ELEMENT)
    const tasks = Math.ceil(members / MEMBERS_PER_TASK / this.threads) * this.threads
    const each = Math.ceil(members / tasks)
    const starts = Array.from({ length: Math.ceil(members / each) }, (_, i) => i * each)
    await this.inTurn(starts, signal, progress, async (first) => {
      const end = Math.min(members, first + each)
      await this.inAir<'flown'>('fly', air, (airOrder): MemberOrder => ({
        air: airOrder,
        plan,
        spread,
        seed,
        first,
        end,
        rows,
      }))
    })
    const summing: SummaryOrder = { rows, spread, regions }
    const summary = (await this.started().run(summing, { name: 'summary' })) as Summary | null
    if (!summary) throw new NoMemberFlies()
    return summary
  }

  /** Flies release times, each in its air; a time that cannot be flown has its reason instead. */
  async survey(
    times: readonly { air: AirRecipe; survey: Survey }[],
    signal?: AbortSignal,
    progress?: Progress,
  ): Promise<(SurveyedTime | NotFlyable)[]> {
    const surveyed: (SurveyedTime | NotFlyable)[] = []
    await this.inTurn([...times.keys()], signal, progress, async (i) => {
      const { air, survey } = times[i]
      try {
        surveyed[i] = await this.inAir<SurveyedTime>('survey', air, (airOrder): SurveyOrder => ({
          ...survey,
          air: airOrder,
        }))
      } catch (error) {
        if (!(error instanceof NotFlyable)) throw error
        surveyed[i] = error
      }
    })
    return surveyed
  }

  /**
   * Reads the soundings in some bytes, which takes seconds where they are many.
   * @throws BadSounding where there is none to fly in
   */
  async read(bytes: Uint8Array, options: ReadOptions): Promise<Sounding[]> {
    const order: ReadOrder = { bytes, options }
    const answer = (await this.started().run(order, { name: 'read' })) as Sounding[] | Unread
    if (Array.isArray(answer)) return answer
    throw new BadSounding(answer.unparseable ? 'unparseable' : 'not-flyable', answer.problems)
  }

  async close(): Promise<void> {
    await this.piscina?.destroy()
  }

  private started(): Piscina {
    return (this.piscina ??= new Piscina({
      filename: workerModule(),
      execArgv: [],
      minThreads: this.threads,
      maxThreads: this.threads,
    }))
  }

  /** Works through items with as many under way as there are threads, so that others get their turn. */
  private async inTurn<Item>(
    items: readonly Item[],
    signal: AbortSignal | undefined,
    progress: Progress | undefined,
    work: (item: Item) => Promise<void>,
  ): Promise<void> {
    let next = 0
    let done = 0
    const lane = async () => {
      while (next < items.length) {
        signal?.throwIfAborted()
        await work(items[next++])
        done++
        progress?.(done / items.length)
      }
    }
    await Promise.all(Array.from({ length: Math.min(this.threads, items.length) }, lane))
    signal?.throwIfAborted()
  }

  /** Runs a task in given air, which is sent along only to a thread that does not have it yet. */
  private async inAir<Result>(
    name: string,
    recipe: AirRecipe,
    order: (air: AirOrder) => unknown,
  ): Promise<Result> {
    const key = recipeKey(recipe)
    let answer = (await this.started().run(order({ key, recipe: null }), { name })) as
      Result | Refused | typeof AIR_MISSING
    if (answer === AIR_MISSING) {
      answer = (await this.started().run(order({ key, recipe }), { name })) as Result | Refused
    }
    if (isRefused(answer)) throw new NotFlyable(answer.notFlyable)
    return answer
  }
}

function isRefused(answer: unknown): answer is Refused {
  return typeof answer === 'object' && answer !== null && 'notFlyable' in answer
}

/** The module that a thread loads: of the build itself, of the sources through the loader of development. */
function workerModule(): string {
  const built = !import.meta.url.endsWith('.ts')
  return new URL(built ? './planningWorker.js' : './sourceWorker.js', import.meta.url).href
}
