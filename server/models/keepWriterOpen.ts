import type { Sequelize } from 'sequelize';

interface Connection {
  close(done: () => void): void;
}
interface ConnectionManager {
  connections: Record<string, Connection | undefined>;
  getConnection(options?: { uuid?: string }): Promise<Connection>;
  releaseConnection(connection: Connection): void;
}

/**
 * Sequelize opens a connection for each SQLite transaction and closes it after, which costs more than
 * a small batch does. With one writer at a time, one connection can serve all transactions; it is
 * closed with the others by `sequelize.close()`. Right only where nothing but writeTransaction begins one.
 *
 * @returns drops that connection: after a failure nobody can know what state it is in
 */
export function keepWriterOpen(sequelize: Sequelize): () => Promise<void> {
  const manager = sequelize.connectionManager as unknown as ConnectionManager;
  const getConnection = manager.getConnection.bind(manager);
  manager.getConnection = (options) => getConnection({ ...options, uuid: options?.uuid ? 'writer' : undefined });
  manager.releaseConnection = () => undefined;
  return async () => {
    const { writer } = manager.connections;
    delete manager.connections.writer;
    if (writer) await new Promise<void>((resolve) => writer.close(() => resolve()));
  };
}
