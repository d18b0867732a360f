import { z } from 'zod';

const envShape = z.object({
  DATABASE_URL: z.string().min(1),
  PORT: z.coerce.number().int().min(0).max(65_535).default(3000),
  /** Address to listen on; loopback unless somebody puts the product behind a proxy on purpose. */
  HOST: z.string().default('127.0.0.1'),
  /** Signs the session cookie. */
  SESSION_SECRET: z.string().min(32),
  /** 1 when a proxy in front speaks https: cookies become Secure and the client address is read from its header. */
  BEHIND_HTTPS_PROXY: z.enum(['0', '1']).default('0'),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
});

export type ServerSettings = {
  databaseUrl: string;
  port: number;
  host: string;
  sessionSecret: string;
  isBehindHttpsProxy: boolean;
  logLevel: z.infer<typeof envShape>['LOG_LEVEL'];
  /** Folder of the built client; null where none is served (development, API tests). */
  clientFolder: string | null;
};

/**
 * Reads the server's settings from environment variables.
 * @throws Error naming each variable that is missing or wrong
 */
export function readSettings(environment: NodeJS.ProcessEnv, clientFolder: string | null): ServerSettings {
  const parsed = envShape.safeParse(environment);
  if (!parsed.success) {
    const lines = parsed.error.issues.map((issue) => `  ${issue.path.join('.')}: ${issue.message}`);
    throw new Error(`These environment variables are missing or wrong:\n${lines.join('\n')}`);
  }
  const env = parsed.data;
  return {
    databaseUrl: env.DATABASE_URL,
    port: env.PORT,
    host: env.HOST,
    sessionSecret: env.SESSION_SECRET,
    isBehindHttpsProxy: env.BEHIND_HTTPS_PROXY === '1',
    logLevel: env.LOG_LEVEL,
    clientFolder,
  };
}
