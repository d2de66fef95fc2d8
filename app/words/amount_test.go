package words

import (
	"testing"

	"weighhouse/model"
)

// The spellings follow each language's ordinary rules: British English with
// "and"; French before the changes of 1990; Spanish of the Academy. From
// memory.
func TestInWords(t *testing.T) {
	currencies := map[string]string{"en": "crowns", "fr": "couronnes", "es": "coronas"}
	for _, c := range []struct{ language, number, want string }{
		{"en", "0", "zero crowns"},
		{"en", "1", "one crown"},
		{"en", "13", "thirteen crowns"},
		{"en", "21", "twenty-one crowns"},
		{"en", "40", "forty crowns"},
		{"en", "100", "one hundred crowns"},
		{"en", "101", "one hundred and one crowns"},
		{"en", "999", "nine hundred and ninety-nine crowns"},
		{"en", "1000", "one thousand crowns"},
		{"en", "1001", "one thousand and one crowns"},
		{"en", "3200", "three thousand two hundred crowns"},
		{"en", "12345", "twelve thousand three hundred and forty-five crowns"},
		{"en", "1000000", "one million crowns"},
		{"en", "1000007", "one million and seven crowns"},
		{"en", "2500000", "two million five hundred thousand crowns"},
		{"en", "1000000000", "one billion crowns"},
		{"en", "999999999999", "nine hundred and ninety-nine billion nine hundred and ninety-nine million nine hundred and ninety-nine thousand nine hundred and ninety-nine crowns"},
		{"en", "1250.5", "one thousand two hundred and fifty crowns and 50/100"},
		{"en", "-20", "minus twenty crowns"},

		{"fr", "1", "une couronne"},
		{"fr", "16", "seize couronnes"},
		{"fr", "17", "dix-sept couronnes"},
		{"fr", "21", "vingt et une couronnes"},
		{"fr", "22", "vingt-deux couronnes"},
		{"fr", "70", "soixante-dix couronnes"},
		{"fr", "71", "soixante et onze couronnes"},
		{"fr", "72", "soixante-douze couronnes"},
		{"fr", "80", "quatre-vingts couronnes"},
		{"fr", "81", "quatre-vingt-une couronnes"},
		{"fr", "90", "quatre-vingt-dix couronnes"},
		{"fr", "91", "quatre-vingt-onze couronnes"},
		{"fr", "99", "quatre-vingt-dix-neuf couronnes"},
		{"fr", "100", "cent couronnes"},
		{"fr", "101", "cent une couronnes"},
		{"fr", "200", "deux cents couronnes"},
		{"fr", "201", "deux cent une couronnes"},
		{"fr", "1000", "mille couronnes"},
		{"fr", "1100", "mille cent couronnes"},
		{"fr", "2000", "deux mille couronnes"},
		{"fr", "21000", "vingt et un mille couronnes"},
		{"fr", "80000", "quatre-vingt mille couronnes"},
		{"fr", "200000", "deux cent mille couronnes"},
		{"fr", "280000", "deux cent quatre-vingt mille couronnes"},
		{"fr", "1000000", "un million de couronnes"},
		{"fr", "1200000", "un million deux cent mille couronnes"},
		{"fr", "80000000", "quatre-vingts millions de couronnes"},
		{"fr", "200000000", "deux cents millions de couronnes"},
		{"fr", "1000000000", "un milliard de couronnes"},
		{"fr", "3000000000", "trois milliards de couronnes"},
		{"fr", "1250.05", "mille deux cent cinquante couronnes et 05/100"},

		{"es", "1", "una corona"},
		{"es", "16", "dieciséis coronas"},
		{"es", "21", "veintiuna coronas"},
		{"es", "22", "veintidós coronas"},
		{"es", "31", "treinta y una coronas"},
		{"es", "100", "cien coronas"},
		{"es", "101", "ciento una coronas"},
		{"es", "200", "doscientas coronas"},
		{"es", "500", "quinientas coronas"},
		{"es", "700", "setecientas coronas"},
		{"es", "900", "novecientas coronas"},
		{"es", "1000", "mil coronas"},
		{"es", "1001", "mil una coronas"},
		{"es", "2000", "dos mil coronas"},
		{"es", "21000", "veintiuna mil coronas"},
		{"es", "100000", "cien mil coronas"},
		{"es", "500000", "quinientas mil coronas"},
		{"es", "1000000", "un millón de coronas"},
		{"es", "1500000", "un millón quinientas mil coronas"},
		{"es", "2000000", "dos millones de coronas"},
		{"es", "21000000", "veintiún millones de coronas"},
		{"es", "1000000000", "mil millones de coronas"},
		{"es", "1250.5", "mil doscientas cincuenta coronas con 50/100"},
	} {
		r := New(Style{Language: c.language})
		if got := r.InWords(number(t, c.number), 2, currencies[c.language]); got != c.want {
			t.Errorf("%s %s: %q, want %q", c.language, c.number, got, c.want)
		}
	}
	for _, c := range []struct{ language, number, currency, want string }{
		{"es", "21", "pesos", "veintiún pesos"},
		{"es", "501", "pesos", "quinientos un pesos"},
		{"es", "21000", "pesos", "veintiún mil pesos"},
		{"es", "1", "quetzales", "un quetzal"},
		{"es", "1", "pesos", "un peso"},
		{"es", "21", "", "veintiuno"},
		{"es", "1001", "", "mil uno"},
		{"es", "1000000", "", "un millón"},
		{"fr", "81", "francs", "quatre-vingt-un francs"},
		{"fr", "1", "francs", "un franc"},
		{"fr", "2000000", "euros", "deux millions d’euros"},
		{"fr", "80", "", "quatre-vingts"},
		{"en", "7", "", "seven"},
	} {
		r := New(Style{Language: c.language})
		if got := r.InWords(number(t, c.number), 0, c.currency); got != c.want {
			t.Errorf("%s %s %s: %q, want %q", c.language, c.number, c.currency, got, c.want)
		}
	}
}

func TestPDPlain(t *testing.T) {
	const months, days = 12, 30
	for _, c := range []struct {
		language string
		pd       model.PD
		want     string
	}{
		{"en", 33_333_333, "about 1 in 30 such borrowers fell more than 30 days behind within 12 months"},
		{"en", 2_881_844, "about 1 in 350 such borrowers fell more than 30 days behind within 12 months"},
		{"en", 100_000_000, "about 10 in 100 such borrowers fell more than 30 days behind within 12 months"},
		{"en", 646_064_953, "about 65 in 100 such borrowers fell more than 30 days behind within 12 months"},
		{"en", 996_000_000, "more than 99 in 100 such borrowers fell more than 30 days behind within 12 months"},
		{"en", 999, "fewer than 1 in 1,000,000 such borrowers fell more than 30 days behind within 12 months"},
		{"en", model.PDOne, "more than 999,999 in 1,000,000 such borrowers fell more than 30 days behind within 12 months"},
		{"fr", 33_333_333, "environ 1 emprunteur semblable sur 30 a eu plus de 30 jours de retard dans un délai de 12 mois"},
		{"fr", 240_000_000, "environ 24 emprunteurs semblables sur 100 ont eu plus de 30 jours de retard dans un délai de 12 mois"},
		{"es", 33_333_333, "alrededor de 1 de cada 30 prestatarios parecidos se atrasó más de 30 días en un plazo de 12 meses"},
	} {
		style := StyleOf(c.language)
		if got := New(style).PDPlain(c.pd, days, months); got != c.want {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}
