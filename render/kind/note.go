package kind

import (
	"context"
	"fmt"
	"time"

	"saddlebook/content/fault"
	"saddlebook/content/schema"
	"saddlebook/render/paper"
)

func init() {
	Register(Kind[noteSource, About]{
		Name:    "note",
		Doc:     "What the page says of itself: date, authors, tags, status, summary.",
		Version: 1,
		Fields: []schema.Field{
			{Key: "title", Doc: "the title of the page", Type: schema.Text, Default: "the first heading", Example: "Addition to enone 3"},
			{Key: "date", Doc: "the day, as year-month-day", Type: schema.Text, Example: "2031-04-02"},
			{Key: "authors", Doc: "who wrote it", Type: schema.Words, Example: `["process group"]`},
			{Key: "tags", Doc: "words to find it by", Type: schema.Words, Example: `["addition"]`},
			{Key: "status", Doc: "how far it is", Type: schema.Text, OneOf: []string{"draft", "in use", "superseded"}, Default: "in use"},
			{Key: "summary", Doc: "the note in a sentence or two", Type: schema.Text, Example: "Cold and short keeps the 1,2-adduct."},
		},
		Check: func(s *noteSource) fault.Problems {
			if _, err := time.Parse(time.DateOnly, s.Date); s.Date != "" && err != nil {
				return fault.Problems{problem([]string{"date"}, fmt.Sprintf("%q is not a day", s.Date), "write year-month-day, such as 2031-04-02")}
			}
			return nil
		},
		Compute: func(_ context.Context, s *noteSource, _ Inputs) (About, error) {
			return About{Title: s.Title, Date: s.Date, Authors: s.Authors, Tags: s.Tags, Status: or(s.Status, "in use"), Summary: s.Summary}, nil
		},
		Present: func(*noteSource, About, *paper.Sheet) {}, // it stands at the head of the page
		About:   func(_ *noteSource, v About) About { return v },
		Once:    true,
	})
}

type noteSource struct {
	Title   string   `key:"title"`
	Date    string   `key:"date"`
	Authors []string `key:"authors"`
	Tags    []string `key:"tags"`
	Status  string   `key:"status"`
	Summary string   `key:"summary"`
}

// About is what a block says of its page.
type About struct {
	Title, Date, Status, Summary string
	Authors, Tags                []string
}
