// Package office holds set-up: accounts, programmes, calibres, depositors.
package office
