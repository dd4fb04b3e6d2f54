package migrations_test

import (
	"context"
	"strings"
	"sync"
	"testing"

	"github.com/jackc/pgx/v5"

	"ratehouse/migrations"
	"ratehouse/store/storetest"
)

// Several programs that start at once apply each file once, and the schema is then current for the
// program's own role.
func TestUpAtOnce(t *testing.T) {
	t.Parallel()
	db := storetest.Empty(t)
	app, err := pgx.Connect(t.Context(), db.App)
	if err != nil {
		t.Fatal(err)
	}
	defer app.Close(context.WithoutCancel(t.Context()))
	if err := migrations.Current(t.Context(), app); err == nil || !strings.Contains(err.Error(), "ratehouse migrate") {
		t.Errorf("an empty database is called current: %v", err)
	}
	var (
		all     sync.WaitGroup
		mu      sync.Mutex
		applied = map[string]int{}
	)
	for range 4 {
		all.Go(func() {
			names, err := migrations.Up(t.Context(), db.Owner)
			mu.Lock()
			defer mu.Unlock()
			if err != nil {
				t.Error(err)
			}
			for _, n := range names {
				applied[n]++
			}
		})
	}
	all.Wait()
	files, err := migrations.Files.ReadDir(".")
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		if applied[f.Name()] != 1 {
			t.Errorf("%s was applied %d times", f.Name(), applied[f.Name()])
		}
	}
	if err := migrations.Current(t.Context(), app); err != nil {
		t.Error(err)
	}
	if _, err := app.Exec(t.Context(), "INSERT INTO rh.schema_version (version_id, is_applied) VALUES (99, true)"); err == nil {
		t.Error("the application role wrote the schema's version")
	}
	if again, err := migrations.Up(t.Context(), db.Owner); err != nil || len(again) != 0 {
		t.Errorf("a second time applied %v, %v", again, err)
	}
}

// The program's role cannot migrate.
func TestUpNeedsTheOwner(t *testing.T) {
	t.Parallel()
	db := storetest.Empty(t)
	if _, err := migrations.Up(t.Context(), db.App); err == nil {
		t.Error("the application role migrated")
	}
}
