package words

import (
	"fmt"
	"strings"

	"weighhouse/model"
)

// InWords writes an amount of money in words, so that a slipped digit shows:
// "three thousand two hundred crowns". Parts of one follow as on a cheque,
// "and 50/100", to the given decimals (at most 2). The currency is the name
// that the scorecard edition gives, in the plural.
func (r *Reader) InWords(n model.Number, decimals int, currency string) string {
	n = n.Round(min(decimals, 2))
	negative := n < 0
	if negative {
		n = -n
	}
	whole := int64(n / model.One)
	var text string
	switch r.style.Language {
	case "fr":
		text = french(whole, strings.HasSuffix(currency, "e") || strings.HasSuffix(currency, "es"))
		if currency != "" && whole >= 1_000_000 && whole%1_000_000 == 0 {
			if strings.ContainsRune("aeiouy", rune(Fold(currency)[0])) {
				text += " d’" + currency
			} else {
				text += " de " + currency
			}
			currency = ""
		}
	case "es":
		text = spanish(whole, strings.HasSuffix(currency, "a") || strings.HasSuffix(currency, "as"))
		switch {
		case currency == "" && strings.HasSuffix(text, "veintiún"):
			text = strings.TrimSuffix(text, "ún") + "uno"
		case currency == "" && whole%10 == 1 && whole%100 != 11:
			text += "o"
		case currency != "" && whole >= 1_000_000 && whole%1_000_000 == 0:
			text += " de"
		}
	default:
		text = english(whole)
	}
	if currency != "" {
		if whole == 1 {
			currency = r.singular(currency)
		}
		text += " " + currency
	}
	if parts := (n % model.One) / (model.One / 100); parts > 0 {
		text = r.T("number.and_parts", "whole", text, "parts", fmt.Sprintf("%02d", parts))
	}
	if negative {
		text = r.T("number.minus", "amount", text)
	}
	return text
}

// singular is a currency's name for one of it, by the commonest plurals.
func (r *Reader) singular(name string) string {
	if r.style.Language == "es" {
		for _, end := range []string{"res", "les", "nes", "des"} {
			if rest, ok := strings.CutSuffix(name, end); ok {
				return rest + end[:1]
			}
		}
	}
	return strings.TrimSuffix(name, "s")
}

var englishUnits = strings.Fields("zero one two three four five six seven eight nine ten eleven twelve thirteen fourteen fifteen sixteen seventeen eighteen nineteen")
var englishTens = strings.Fields("- - twenty thirty forty fifty sixty seventy eighty ninety")

func english(n int64) string {
	switch {
	case n < 20:
		return englishUnits[n]
	case n < 100:
		return join(englishTens[n/10], "-", n%10, english)
	case n < 1000:
		return join(english(n/100)+" hundred", " and ", n%100, english)
	}
	for _, big := range []struct {
		size int64
		name string
	}{{1_000_000_000, " billion"}, {1_000_000, " million"}, {1000, " thousand"}} {
		if n >= big.size {
			between := " "
			if n%big.size < 100 {
				between = " and "
			}
			return join(english(n/big.size)+big.name, between, n%big.size, english)
		}
	}
	return ""
}

var frenchUnits = strings.Fields("zéro un deux trois quatre cinq six sept huit neuf dix onze douze treize quatorze quinze seize dix-sept dix-huit dix-neuf")
var frenchTens = strings.Fields("- - vingt trente quarante cinquante soixante soixante quatre-vingt quatre-vingt")

// french follows the spelling before 1990: hyphens below one hundred, and
// vingt and cent take an s when they end the number or stand before million.
func french(n int64, feminine bool) string {
	if feminine && n%10 == 1 && n%100 != 11 && n%100 != 71 && n%100 != 91 {
		return french(n, false) + "e"
	}
	rest := func(n int64) string { return french(n, false) }
	switch {
	case n < 20:
		return frenchUnits[n]
	case n < 100:
		tens, units := n/10, n%10
		if tens == 7 || tens == 9 {
			units += 10
		}
		switch {
		case n == 80:
			return "quatre-vingts"
		case n == 21 || n == 31 || n == 41 || n == 51 || n == 61 || n == 71:
			return frenchTens[tens] + " et " + frenchUnits[units]
		}
		return join(frenchTens[tens], "-", units, rest)
	case n < 1000:
		if n%100 == 0 && n > 100 {
			return frenchUnits[n/100] + " cents"
		}
		return join(strings.TrimPrefix(frenchUnits[n/100]+" cent", "un "), " ", n%100, rest)
	case n < 1_000_000:
		if n < 2000 {
			return join("mille", " ", n%1000, rest)
		}
		thousands := french(n/1000, false)
		if strings.HasSuffix(thousands, "vingts") || strings.HasSuffix(thousands, "cents") {
			thousands = strings.TrimSuffix(thousands, "s")
		}
		return join(thousands+" mille", " ", n%1000, rest)
	case n < 1_000_000_000:
		return join(french(n/1_000_000, false)+plural(" million", n/1_000_000), " ", n%1_000_000, rest)
	}
	return join(french(n/1_000_000_000, false)+plural(" milliard", n/1_000_000_000), " ", n%1_000_000_000, rest)
}

func plural(name string, n int64) string {
	if n > 1 {
		return name + "s"
	}
	return name
}

var spanishUnits = strings.Fields("cero un dos tres cuatro cinco seis siete ocho nueve diez once doce trece catorce quince dieciséis diecisiete dieciocho diecinueve veinte veintiún veintidós veintitrés veinticuatro veinticinco veintiséis veintisiete veintiocho veintinueve")
var spanishTens = strings.Fields("- - - treinta cuarenta cincuenta sesenta setenta ochenta noventa")
var spanishHundreds = strings.Fields("- ciento doscientos trescientos cuatrocientos quinientos seiscientos setecientos ochocientos novecientos")

// spanish is the number as it stands before a noun, whose gender one and the
// hundreds follow; millions are masculine by themselves.
func spanish(n int64, feminine bool) string {
	rest := func(n int64) string { return spanish(n, feminine) }
	switch {
	case n < 30:
		if feminine && (n == 1 || n == 21) {
			return []string{"una", "veintiuna"}[n/20]
		}
		return spanishUnits[n]
	case n < 100:
		return join(spanishTens[n/10], " y ", n%10, rest)
	case n == 100:
		return "cien"
	case n < 1000:
		hundreds := spanishHundreds[n/100]
		if feminine && n >= 200 {
			hundreds = strings.TrimSuffix(hundreds, "os") + "as"
		}
		return join(hundreds, " ", n%100, rest)
	case n < 1_000_000:
		if n < 2000 {
			return join("mil", " ", n%1000, rest)
		}
		return join(spanish(n/1000, feminine)+" mil", " ", n%1000, rest)
	case n < 2_000_000:
		return join("un millón", " ", n%1_000_000, rest)
	}
	return join(spanish(n/1_000_000, false)+" millones", " ", n%1_000_000, rest)
}

// join adds what is left of a number, if anything is.
func join(text, between string, rest int64, say func(int64) string) string {
	if rest == 0 {
		return text
	}
	return text + between + say(rest)
}
