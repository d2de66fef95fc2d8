package main

import (
	"bytes"
	"context"
	"encoding/csv"
	"fmt"
	"io"
	"os"
	"os/signal"
	"path/filepath"
	"runtime"
	"strings"
	"syscall"

	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store/table"
)

// resultHeader is the header of a table of results.
var resultHeader = []string{"ref", "log_odds", "pd", "pd_low", "pd_high", "score", "band", "recommendation", "rules", "reasons", "problem"}

// score scores a table of applicants, in the order of its rows.
func (k *clerk) score() error {
	on, err := k.day()
	if err != nil {
		return err
	}
	edition, err := k.edition()
	if err != nil {
		return err
	}
	if out := k.option["out"]; strings.EqualFold(filepath.Ext(out), ".xlsx") {
		return ending(out, ".csv")
	}
	in := k.in
	if path := k.option["in"]; path != "-" {
		f, err := os.Open(path)
		if err != nil {
			return cannot(err)
		}
		defer f.Close()
		in = f
	}
	rows, err := table.NewReader(in)
	if err != nil {
		return cannot(err)
	}
	columns, problems := table.ColumnsOf(edition, rows.Header())
	for _, p := range append(problems, edition.Ground(edition.NewAnswers(on, ""), on)...) {
		switch {
		case ofDay(p): // told of each row: rows have days of their own
		case p.Warning:
			k.note(p)
		default:
			fmt.Fprintln(k.err, k.words.Problem(p))
		}
	}
	if columns == nil {
		return errRefused
	}
	out, err := k.create(k.option["out"], k.option["in"], k.option["card"])
	if err != nil {
		return err
	}
	client := model.ClientKind(k.option["client"])
	if client == "" {
		client = model.NewClients
	}
	s := &scorer{edition: edition, columns: columns, words: k.words, labels: words.LabelsOf(edition, k.words.Style().Language), rules: edition.Rules(), on: on, client: client}
	bar := k.progress()
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM) // to take away what is half written
	defer stop()
	scored, refused, err := s.all(ctx, rows, out, func(n int) { bar.tell("clerk.progress_score", "n", n) })
	bar.end()
	if err = out.finish(err); err != nil {
		return err
	}
	fmt.Fprintln(k.err, k.words.T("clerk.scored", "n", scored))
	if refused > 0 {
		fmt.Fprintln(k.err, k.words.T("clerk.not_scored", "n", refused))
	}
	if refused > 0 && scored == 0 {
		return errRefused
	}
	return nil
}

// A scorer turns rows into rows of results. Several goroutines use it at once.
type scorer struct {
	edition *model.Edition
	columns *table.Columns
	words   *words.Reader
	labels  *words.Labels
	rules   []model.PolicyRule
	on      model.Date
	client  model.ClientKind
}

// A batch is some rows on their way from the reader through a worker to the
// writer.
type batch struct {
	rows            []table.Row
	text            bytes.Buffer
	scored, refused int
	done            chan struct{}
}

const batchRows = 256

// all scores every row, each processor a batch at a time, and writes the
// results in the order of the rows. No more batches are under way than twice
// the processors, so memory does not grow with the table.
func (s *scorer) all(ctx context.Context, in *table.Reader, out io.Writer, tell func(rows int)) (scored, refused int, err error) {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	workers := runtime.GOMAXPROCS(0)
	order := make(chan *batch, 2*workers) // as read
	work := make(chan *batch, 2*workers)
	var reading error
	go func() {
		defer close(order)
		defer close(work)
		for reading == nil {
			b := &batch{done: make(chan struct{})}
			for len(b.rows) < batchRows && reading == nil {
				var row table.Row
				if row, reading = in.Read(); reading == nil {
					b.rows = append(b.rows, row)
				}
			}
			select {
			case order <- b:
				work <- b
			case <-ctx.Done():
				return
			}
		}
	}()
	for range workers {
		go func() {
			for b := range work {
				s.batch(b)
				close(b.done)
			}
		}()
	}
	header := csv.NewWriter(out)
	header.Write(resultHeader)
	if header.Flush(); header.Error() != nil {
		return 0, 0, header.Error()
	}
	for {
		var b *batch
		select {
		case b = <-order:
		case <-ctx.Done():
			return scored, refused, problem("clerk_interrupted")
		}
		if b == nil {
			break
		}
		<-b.done
		scored, refused = scored+b.scored, refused+b.refused
		if _, err := out.Write(b.text.Bytes()); err != nil {
			return scored, refused, err
		}
		tell(scored + refused)
	}
	switch reading {
	case io.EOF:
		return scored, refused, nil
	case nil: // the reader stopped because it was told to
		return scored, refused, problem("clerk_interrupted")
	}
	return scored, refused, cannot(reading)
}

func (s *scorer) batch(b *batch) {
	w := csv.NewWriter(&b.text)
	for _, row := range b.rows {
		line, ok := s.row(row)
		if ok {
			b.scored++
		} else {
			b.refused++
		}
		w.Write(line)
	}
	w.Flush() // a buffer takes everything
}

// row is a row of the table of results, and whether there is a result.
func (s *scorer) row(row table.Row) (cells []string, scored bool) {
	a := s.columns.Applicant(row, s.on, s.client)
	cells = make([]string, len(resultHeader))
	cells[0] = a.Ref
	if !a.Refused() {
		if r, ok := s.edition.Score(a.Answers); ok {
			scored = true
			s.figures(cells[1:], a.Answers, r)
			if most, over := overCap(a.Answers, r); over {
				p := problem("over_cap", "most", most.String(), "currency", s.labels.Currency())
				p.Place = model.Place{Sheet: "Answers", Column: model.Amount}
				a.Problems = append(a.Problems, p)
			}
			for _, p := range ground(s.edition, a.Answers) {
				if p.Place.Column != "" || ofDay(p) { // the others are told once, of all
					a.Problems = append(a.Problems, p)
				}
			}
		}
	}
	var sentences []string
	for _, p := range a.Problems {
		sentences = append(sentences, s.words.Problem(p))
	}
	cells[len(cells)-1] = strings.Join(sentences, " ")
	return cells, scored
}

// ground lists what is to be borne in mind of an estimate on its day.
func ground(e *model.Edition, a *model.Answers) []model.Problem {
	list := e.Ground(a, a.On)
	if from := e.Scorecard().Card.InForceFrom; a.On.Before(from) {
		p := problem("not_yet_in_force", "value", a.On.String(), "from", from.String())
		p.Warning = true
		list = append(list, p)
	}
	return list
}

// ofDay tells a problem of the day of an application.
func ofDay(p model.Problem) bool { return p.Code == "past_review" || p.Code == "not_yet_in_force" }

// overCap is the most that the rules allow, where more is asked for.
func overCap(a *model.Answers, r model.Result) (most model.Number, over bool) {
	amount, _, _ := a.AmountAndTerm()
	return r.LargestAmount.Value, r.LargestAmount.Set && amount > r.LargestAmount.Value
}

// figures fills in log_odds to reasons, in canonical text and codes.
func (s *scorer) figures(cells []string, a *model.Answers, r model.Result) {
	cells[0], cells[1] = r.LogOdds.String(), r.PD.String()
	if low, high, ok := s.edition.Range(a); ok {
		cells[2], cells[3] = low.String(), high.String()
	}
	cells[4] = r.Score.String()
	cells[5] = s.edition.Scorecard().Bands[r.Band].Code
	cells[6] = string(r.Recommendation)
	var fired, reasons []string
	for i, rule := range s.rules {
		if r.Fired.Has(i) {
			fired = append(fired, rule.Code)
		}
	}
	cells[7] = strings.Join(fired, " ")
	for _, rule := range s.edition.DecliningRules(r.Fired) {
		reasons = append(reasons, "rule."+rule.Code)
	}
	if reasons == nil {
		for _, step := range s.edition.Reasons(a) {
			item := &s.edition.Items()[step.Index]
			reason := item.Code
			if step.Attribute >= 0 {
				reason += "." + item.Attributes[step.Attribute].Code
			}
			reasons = append(reasons, reason)
		}
	}
	cells[8] = strings.Join(reasons, " ")
}
