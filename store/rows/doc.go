// Package rows holds the SQL: rows in, rows out, on one transaction.
package rows
