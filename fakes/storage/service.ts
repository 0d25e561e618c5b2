import type { ServerResponse } from 'node:http'
import type { Credentials } from './authenticate'
import type { AllowedOrigins } from './cors'
import { emptyTempFolder } from './disk'
import { FailureOrders } from './failures'
import { ObjectStore } from './object-store'
import { UploadStore } from './upload-store'

export interface ServiceSettings {
  dataDir: string
  bucket: string
  credentials: Credentials
  allowedOrigins: AllowedOrigins
  now: () => number
}

/** Everything the stand-in remembers: what is stored on disk, and in memory what tests ask about. */
export class Service {
  readonly failures = new FailureOrders()
  readonly hanging = new Set<ServerResponse>()
  readonly requestCounts = new Map<string, number>()
  readonly refusalCounts = new Map<string, number>()

  private constructor(
    readonly settings: ServiceSettings,
    readonly objects: ObjectStore,
    readonly uploads: UploadStore,
  ) {}

  static async open(settings: ServiceSettings): Promise<Service> {
    await emptyTempFolder(settings.dataDir)
    return new Service(settings, await ObjectStore.open(settings.dataDir), await UploadStore.open(settings.dataDir))
  }

  countRequest(name: string): void {
    this.requestCounts.set(name, (this.requestCounts.get(name) ?? 0) + 1)
  }

  countRefusal(row: string): void {
    this.refusalCounts.set(row, (this.refusalCounts.get(row) ?? 0) + 1)
  }

  /** Lets go of requests that were left hanging, by cutting them off. */
  releaseHanging(): void {
    for (const response of this.hanging) response.destroy()
    this.hanging.clear()
  }

  async reset(): Promise<void> {
    this.failures.clear()
    this.releaseHanging()
    this.requestCounts.clear()
    this.refusalCounts.clear()
    await this.uploads.clear()
    await this.objects.clear()
  }
}
