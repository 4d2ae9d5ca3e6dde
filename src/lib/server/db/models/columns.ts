import { DataTypes, type ModelAttributeColumnOptions } from 'sequelize';

// A fresh object each: Sequelize writes into the ones that it is given.

/** Text, times (ISO 8601 in UTC) and JSON alike. */
export function text(): ModelAttributeColumnOptions {
	return { type: DataTypes.TEXT, allowNull: false };
}

export function textOrNull(): ModelAttributeColumnOptions {
	return { type: DataTypes.TEXT, allowNull: true };
}

export function integer(): ModelAttributeColumnOptions {
	return { type: DataTypes.INTEGER, allowNull: false };
}

export function integerOrNull(): ModelAttributeColumnOptions {
	return { type: DataTypes.INTEGER, allowNull: true };
}

export function real(): ModelAttributeColumnOptions {
	return { type: DataTypes.REAL, allowNull: false };
}

/** A number that the database hands out. */
export function serial(): ModelAttributeColumnOptions {
	return { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true };
}

/** Marks a column as (part of) the primary key. */
export function key(column: ModelAttributeColumnOptions): ModelAttributeColumnOptions {
	return { ...column, primaryKey: true };
}
