package rows

import (
	"strings"

	"github.com/jackc/pgx/v5"
)

// FoundBatch is a batch that a search found.
type FoundBatch struct {
	Code      string
	Depositor string // title
	Calibre   *string
}

// SearchBatches queues the batches whose code holds the words; the whole code first, then the latest.
func SearchBatches(b *pgx.Batch, into *[]FoundBatch, site int16, words string, most int) {
	list(b, into, `SELECT b.code, d.title AS depositor, c.code AS calibre FROM batch b
		JOIN depositor d ON d.id = b.depositor LEFT JOIN calibre c ON c.id = b.calibre
		WHERE b.site = $1 AND position($2 IN b.code) > 0 ORDER BY b.code = $2 DESC, b.starts_at DESC, b.code LIMIT $3`, site, words, most)
}

// FoundMovement is a movement that a search found.
type FoundMovement struct {
	Serial    string
	Batch     string
	Depositor string // title
	Calibre   *string
	Attempt   int16
}

// eachWay bounds how many movements one way of searching gathers: who types one digit is not served
// by sorting a million.
const eachWay = "LIMIT 500"

// SearchMovements queues the movements whose number begins or ends with the words, as typed or in
// capitals, each way by its index; the whole number first, then the latest batch.
func SearchMovements(b *pgx.Batch, into *[]FoundMovement, site int16, words string, most int) {
	like := strings.NewReplacer(`\`, `\\`, `%`, `\%`, `_`, `\_`)
	upper := strings.ToUpper(words)
	list(b, into, `SELECT m.serial, b.code AS batch, d.title AS depositor, c.code AS calibre, m.attempt
		FROM (SELECT batch, no FROM movement WHERE serial IN ($2, $3)
			UNION (SELECT batch, no FROM movement WHERE serial LIKE $4 `+eachWay+`)
			UNION (SELECT batch, no FROM movement WHERE serial LIKE $5 `+eachWay+`)
			UNION (SELECT batch, no FROM movement WHERE reverse(serial) LIKE $6 `+eachWay+`)
			UNION (SELECT batch, no FROM movement WHERE reverse(serial) LIKE $7 `+eachWay+`)) f
		JOIN movement m ON m.batch = f.batch AND m.no = f.no JOIN batch b ON b.id = m.batch AND b.site = $1
		JOIN depositor d ON d.id = m.depositor LEFT JOIN calibre c ON c.id = m.calibre
		ORDER BY m.serial IN ($2, $3) DESC, b.starts_at DESC, m.serial LIMIT $8`,
		site, words, upper, like.Replace(words)+"%", like.Replace(upper)+"%", like.Replace(reversed(words))+"%", like.Replace(reversed(upper))+"%", most)
}

func reversed(s string) string {
	r := []rune(s)
	for i, j := 0, len(r)-1; i < j; i, j = i+1, j-1 {
		r[i], r[j] = r[j], r[i]
	}
	return string(r)
}
