package importers

import (
	"context"
	"errors"
	"fmt"
	"strings"
	"testing"

	"lotpair/qa"
)

// longTexts are files long enough that their reading looks at the watch.
func longFiles(t *testing.T) map[string][]byte {
	t.Helper()
	var text, side strings.Builder
	text.WriteString("Lot;Part;Bore\n")
	side.WriteString("R;C\n")
	rows := [][]any{{"Lot", "Part", "Bore"}}
	for i := range 3 * watchRows {
		lot := "R"
		if i%2 == 1 {
			lot = "C"
		}
		value := fmt.Sprintf("12.%03d", i*7919%1000)
		fmt.Fprintf(&text, "%s;%d;%s\n", lot, i, value)
		fmt.Fprintf(&side, "%s;%s\n", value, value)
		rows = append(rows, []any{lot, num(fmt.Sprint(i)), num(value)})
	}
	return map[string][]byte{
		"long.csv": []byte(text.String()), "beside.csv": []byte(side.String()),
		"long.xlsx": xlsx(t, sheetOf{name: "Data", rows: rows}),
	}
}

// A reading can be stopped wherever its watch is asked; it then gives that error and nothing else, and one that is not
// stopped is the same as one without a watch.
func TestStopped(t *testing.T) {
	for name, data := range longFiles(t) {
		plan := qa.Plan{Format: qa.PlanFormat, Reference: qa.LotPlan{Lot: "R", File: name}, Candidate: qa.LotPlan{Lot: "C", File: name}}
		open := func(string) ([]byte, error) { return data, nil }
		for what, job := range map[string]func(w Watched) (any, error){
			"read":    func(w Watched) (any, error) { return w.Read(plan, open) },
			"inspect": func(w Watched) (any, error) { return w.Inspect(name, data, "", "") },
		} {
			want, err := job(Watched{})
			if err != nil {
				t.Fatal(name, what, err)
			}
			var told []qa.Progress
			got, err := job(Under(qa.Watch{Progress: func(p qa.Progress) { told = append(told, p) }}))
			if err != nil || fmt.Sprint(got) != fmt.Sprint(want) && what == "read" {
				t.Fatalf("%s %s: got %v, want the same under a watch", name, what, err)
			}
			doing := map[string]bool{}
			for _, p := range told {
				doing[p.Doing] = true
				if p.Of == "" || p.Total > 0 && (p.Done < 0 || p.Done > p.Total) {
					t.Errorf("%s %s: told %+v", name, what, p)
				}
			}
			if !doing[reading] || !doing[layingOut] || !doing[taking] {
				t.Errorf("%s %s: told of %v, want reading, layout and readings", name, what, doing)
			}
			for at := range told {
				ctx, stop := context.WithCancel(context.Background())
				n := 0
				got, err := job(Under(qa.Watch{Context: ctx, Progress: func(qa.Progress) {
					if n++; n > at {
						stop()
					}
				}}))
				stop()
				var is *qa.StoppedError
				if at == len(told)-1 && err == nil {
					continue // it was as good as done
				}
				if !errors.As(err, &is) || !errors.Is(err, context.Canceled) {
					t.Errorf("%s %s stopped at %+v: got %v, want that it was stopped", name, what, told[at], err)
				}
				if r, ok := got.(qa.Readings); ok && (r.Reference.Series != nil || r.Ledger != nil) {
					t.Errorf("%s %s stopped at %+v: something is left", name, what, told[at])
				}
			}
		}
	}
}
