import 'server-only';
import {
  DataTypes,
  type Model,
  type ModelAttributes,
  type ModelStatic,
  type Order,
  type Sequelize,
  type Transaction,
  type WhereOptions,
} from 'sequelize';
import { database } from './index';

/** `text` and `integer` as SQLite knows them; a `flag` is 0 or 1 in the database and a boolean outside. */
export type Column = 'text' | 'integer' | 'flag';

type Where<Row> = WhereOptions<Row>;
interface In {
  transaction?: Transaction;
}
interface Selection<Row> extends In {
  order?: [keyof Row & string, 'ASC' | 'DESC'][];
  limit?: number;
  offset?: number;
}

/**
 * A Sequelize model whose instances never leave: everything read is a plain typed row with camelCase names.
 *
 * @example const machines = new Table<MachineRow>('machines', ['id'], { id: 'text', make: 'text' });
 */
export class Table<Row extends object> {
  private model: ModelStatic<Model> | undefined;
  private owner: Sequelize | undefined;
  private readonly flags: string[];

  constructor(
    readonly name: string,
    private readonly primaryKey: (keyof Row & string)[],
    private readonly columns: Record<keyof Row & string, Column>,
  ) {
    this.flags = Object.entries(columns)
      .filter(([, type]) => type === 'flag')
      .map(([column]) => column);
  }

  async find(where: Where<Row>, options: In = {}): Promise<Row | null> {
    const row = await this.modelNow().findOne({ where, raw: true, ...options });
    return row === null ? null : this.plain(row);
  }

  async all(where: Where<Row> = {}, options: Selection<Row> = {}): Promise<Row[]> {
    const rows = await this.modelNow().findAll({ where, raw: true, ...options, order: options.order as Order });
    return rows.map((row) => this.plain(row));
  }

  count(where: Where<Row> = {}, options: In = {}): Promise<number> {
    return this.modelNow().count({ where, ...options });
  }

  async insert(row: Row, options: In = {}): Promise<void> {
    await this.modelNow().create({ ...row } as Record<string, unknown>, options);
  }

  async insertMany(rows: Row[], options: In = {}): Promise<void> {
    const copies = rows.map((row) => ({ ...row }) as Record<string, unknown>);
    if (copies.length > 0) await this.modelNow().bulkCreate(copies, options);
  }

  /** Returns how many rows were changed. */
  async update(where: Where<Row>, values: Partial<Row>, options: In = {}): Promise<number> {
    const [changed] = await this.modelNow().update({ ...values }, { where, ...options });
    return changed;
  }

  remove(where: Where<Row>, options: In = {}): Promise<number> {
    return this.modelNow().destroy({ where, ...options });
  }

  private modelNow(): ModelStatic<Model> {
    const sequelize = database();
    if (this.model === undefined || this.owner !== sequelize) {
      const attributes: ModelAttributes = {};
      for (const [column, type] of Object.entries<Column>(this.columns)) {
        attributes[column] = {
          type: type === 'text' ? DataTypes.TEXT : DataTypes.INTEGER,
          primaryKey: (this.primaryKey as string[]).includes(column),
        };
      }
      this.model = sequelize.define(this.name, attributes, { tableName: this.name });
      // Sequelize adds an id of its own to a table without a primary key.
      if (this.primaryKey.length === 0) this.model.removeAttribute('id');
      this.owner = sequelize;
    }
    return this.model;
  }

  private plain(row: object): Row {
    const copy: Record<string, unknown> = { ...row };
    for (const flag of this.flags) copy[flag] = copy[flag] === 1 || copy[flag] === true;
    return copy as Row;
  }
}
