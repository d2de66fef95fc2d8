package desk

import (
	"image/png"
	"os"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

func TestShots(t *testing.T) {
	for _, dark := range []bool{false, true} {
		for _, lang := range []string{"en", "fr"} {
			test.NewApp()
			fyne.CurrentApp().Settings().SetTheme(look{dark})
			r := words.New(words.StyleOf(lang))
			opt := func(labels ...string) (o []option) {
				for i, l := range labels {
					o = append(o, option{label: l, answer: model.Answer{State: model.Given, Attribute: i}})
				}
				return o
			}
			row := newPicker(r, nil, append(opt("Owner", "Tenant", "With family"), unknownOption("does not know")))
			row.put(model.Answer{State: model.Given, Attribute: 1})
			yn := newYesNoBox(r, nil, option{answer: model.Answer{State: model.Given, Attribute: 0}}, option{answer: model.Answer{State: model.Given, Attribute: 1}}, "")
			long := strings.Repeat("Sells vegetables and fruit from a fixed stall ", 2)[:80]
			many := newPicker(r, nil, append(opt("Carrier with a cart", "Market stall", "Smallholder", "Workshop", "Épicerie de village", "Étal fixe", long, "Other trade"), unknownOption("does not know")))
			many.put(model.Answer{State: model.Given, Attribute: 6})
			short := newPicker(r, nil, many.options)
			money := newNumberBox(r, nil, numberKind{decimals: 2, unit: "crowns", money: true})
			bad := newNumberBox(r, nil, numberKind{decimals: 2, unit: "crowns", money: true})
			sure := newNumberBox(r, nil, numberKind{unit: "months"})
			sure.check = func(a model.Answer) []model.Problem {
				return []model.Problem{{Code: "outside_accepted", Warning: true, Args: model.Args{"value": "400", "least": "1", "most": "60"}}}
			}
			date := newDateBox(r, nil, true, "does not know")
			off := newNumberBox(r, nil, numberKind{unit: "acres"})
			off.Disable()
			offRow := newPicker(r, nil, opt("Yes", "No"))
			offRow.Disable()
			ws := newWorksheetBox(r, nil, worksheetKind{lines: []worksheetLine{{"Stall takings", model.Adds, model.Week}, {"Wages of the household, all of it together", model.Adds, model.Month}, {"Food", model.TakesAway, model.Week}, {"School fees", model.TakesAway, model.Season}},
				decimals: 2, currency: "crowns", monthly: func(l []model.Money) model.Number { return model.Whole(1234) }})
			var objs []fyne.CanvasObject
			for _, b := range []box{row, yn, many, short, money, bad, sure, date, off, offRow, ws} {
				objs = append(objs, container.New(layout.NewCustomPaddedVBoxLayout(0), b, b.line()))
			}
			w := test.NewWindow(container.NewHBox(container.NewGridWrap(fyne.NewSize(460, 680), container.NewVBox(objs...)), widget.NewLabel("")))
			w.Resize(fyne.NewSize(640, 690))
			c := w.Canvas()
			c.Focus(money.entry)
			typeText(c, map[string]string{"en": "3200", "fr": "3200"}[lang])
			press(c, "Return")
			typeText(c, map[string]string{"en": "1.250,50", "fr": "1.5"}[lang])
			sure.focus()
			typeText(c, "400")
			press(c, "Return")
			date.focus()
			typeText(c, "3/2/2026")
			ws.focus()
			typeText(c, "500d")
			press(c, "Return")
			typeText(c, "80")
			save := func(name string) {
				f, _ := os.Create("/tmp/wh/shots/" + name + ".png")
				defer f.Close()
				png.Encode(f, c.Capture())
			}
			theme := map[bool]string{false: "light", true: "dark"}[dark]
			save(lang + "-" + theme)
			if lang == "en" {
				many.focus()
				typeText(c, "s")
				save("list-" + theme)
				press(c, "BackSpace", "Down", "Down")
				save("list2-" + theme)
			}
		}
	}
}
