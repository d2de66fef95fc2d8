package practice

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"slices"
	"strings"

	"weighhouse/assets"
	"weighhouse/model"
)

// An Application is an invented past one.
type Application struct {
	Ref, Name string
	Answers   *model.Answers
}

// Applications are the practice branch's past applications in the order of
// their days, answered to the editions given by product code.
func Applications(editions map[string]*model.Edition) ([]Application, error) {
	rows, err := csv.NewReader(bytes.NewReader(assets.PracticeApplications())).ReadAll()
	if err != nil {
		return nil, err
	}
	var list []Application
	for _, cells := range rows[1:] {
		row := map[string]string{}
		for i, code := range rows[0] {
			row[code] = cells[i]
		}
		answers, err := answersOf(row, editions[row["product"]])
		if err != nil {
			return nil, fmt.Errorf("%s: %w", row["ref"], err)
		}
		list = append(list, Application{row["ref"], row["name"], answers})
	}
	return list, nil
}

func answersOf(row map[string]string, e *model.Edition) (*model.Answers, error) {
	if e == nil {
		return nil, fmt.Errorf("no edition of %q", row["product"])
	}
	on, err := model.ParseDate(row["on"])
	if err != nil {
		return nil, err
	}
	a := e.NewAnswers(on, model.ClientKind(row["client"]))
	seen := strings.Fields(row["seen"])
	for i := range e.Items() {
		item := &e.Items()[i]
		if item.Kind == model.Computed {
			continue
		}
		answer, err := e.ParseAnswer(i, textOf(row, item))
		if err != nil {
			return nil, fmt.Errorf("%s: %w", item.Code, err)
		}
		answer.Seen = slices.Contains(seen, item.Code)
		a.Put(i, answer)
	}
	return a, nil
}

// textOf is an answer's canonical text: its own cell, or those of its lines,
// each in its usual period.
func textOf(row map[string]string, item *model.Item) string {
	if text := row[item.Code]; text != "" {
		return text
	}
	var lines []string
	for _, line := range item.Lines {
		if amount := row[item.Code+"."+line.Code]; amount != "" {
			lines = append(lines, line.Code+":"+amount+"/"+string(line.Period))
		}
	}
	return strings.Join(lines, " ")
}
