// Package desk serves the QA lead: batches, the batch page, rate sheets, search. Who is reading sees
// progress and places on the same pages, and no verdict, limit or value.
package desk
