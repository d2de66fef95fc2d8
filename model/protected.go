package model

import (
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"
)

// protectedWords are words, in the three languages of the program, whose
// presence in a code or a question makes a characteristic look protected:
// sex, age, marriage, religion, origin, disability and common stand-ins for
// them. The grounds are those of 15 U.S.C. 1691(a) and of many laws on equal
// treatment; the list itself is common practice, no source. It warns a lender;
// it does not replace the law of the place.
var protectedWords = map[string]string{
	"sex": "sex", "gender": "sex", "male": "sex", "female": "sex", "sexe": "sex", "sexo": "sex", "genre": "sex", "genero": "sex",
	"pregnant": "sex", "pregnancy": "sex", "enceinte": "sex", "embarazada": "sex",
	"age": "age", "ages": "age", "edad": "age", "born": "age", "birth": "age", "birthday": "age", "naissance": "age", "nacimiento": "age",
	"married": "marriage", "marriage": "marriage", "marital": "marriage", "spouse": "marriage", "widow": "marriage", "widowed": "marriage",
	"divorced": "marriage", "husband": "marriage", "wife": "marriage", "marie": "marriage", "mariage": "marriage", "conjoint": "marriage",
	"matrimonial": "marriage", "casado": "marriage", "casada": "marriage", "matrimonio": "marriage", "conyuge": "marriage",
	"religion": "religion", "church": "religion", "faith": "religion", "mosque": "religion", "eglise": "religion", "iglesia": "religion",
	"race": "origin", "ethnic": "origin", "ethnicity": "origin", "tribe": "origin", "tribal": "origin", "caste": "origin", "clan": "origin",
	"nationality": "origin", "citizenship": "origin", "colour": "origin", "color": "origin", "raza": "origin", "etnia": "origin", "tribu": "origin",
	"ethnie": "origin", "nationalite": "origin", "nacionalidad": "origin", "birthplace": "origin", "migrant": "origin",
	"disability": "disability", "disabled": "disability", "handicap": "disability", "discapacidad": "disability", "illness": "disability", "hiv": "disability",
	"village": "stand_in", "language": "stand_in", "surname": "stand_in", "neighbourhood": "stand_in", "neighborhood": "stand_in",
	"postcode": "stand_in", "district": "stand_in", "langue": "stand_in", "idioma": "stand_in", "aldea": "stand_in", "quartier": "stand_in", "barrio": "stand_in",
}

// looksProtected gives the ground that a characteristic's code or question
// names, or empty.
func looksProtected(ch *Characteristic) string {
	for _, word := range words(strings.ReplaceAll(ch.Code, "_", " ") + " " + ch.Question) {
		if ground := protectedWords[word]; ground != "" {
			return ground
		}
	}
	return ""
}

// words are the words of a text in small letters without accents.
func words(text string) []string {
	plain := strings.Map(func(r rune) rune {
		if unicode.Is(unicode.Mn, r) {
			return -1
		}
		return unicode.ToLower(r)
	}, norm.NFD.String(text))
	return strings.FieldsFunc(plain, func(r rune) bool { return !unicode.IsLetter(r) })
}

// findGrounds finds the ground by which each item looks protected, through
// what it is computed from too. Amount and term are never.
func (c *compiler) findGrounds() {
	c.grounds = make([]string, len(c.e.items))
	for i := range c.e.items {
		item := &c.e.items[i]
		switch {
		case item.Code == Amount || item.Code == Term:
		case item.Operation == AgeAtLastPayment:
			c.grounds[i] = "age"
		default:
			c.grounds[i] = looksProtected(&item.Characteristic)
		}
	}
	for _, i := range c.e.order {
		for _, p := range c.e.items[i].parts {
			switch {
			case c.grounds[i] != "":
			case c.e.items[p.index].Use == Watched:
				c.grounds[i] = "watched"
			default:
				c.grounds[i] = c.grounds[p.index]
			}
		}
	}
}

// protected refuses to score what looks protected without a lawful ground.
func (c *compiler) protected() {
	c.findGrounds()
	for _, i := range c.e.scored {
		if item := &c.e.items[i]; item.LawfulGround == "" && c.grounds[i] != "" {
			c.add(Problem{Code: "protected_scored", Place: at("Characteristics", c.row(item), "Use"),
				Args: Args{"value": item.Code, "ground": c.grounds[i]}})
		}
	}
}
