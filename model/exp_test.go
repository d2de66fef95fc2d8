package model

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"math"
	"math/big"
	"math/rand/v2"
	"os"
	"os/exec"
	"regexp"
	"strings"
	"testing"
)

const bitsOfBig = 200

func bigFloat(x float64) *big.Float { return new(big.Float).SetPrec(bitsOfBig).SetFloat64(x) }

// bigExp is e^x by the Taylor series of x/2^k, squared k times.
func bigExp(x float64) *big.Float {
	const k = 20
	y := bigFloat(x)
	y.SetMantExp(y, -k)
	sum, term := bigFloat(1), bigFloat(1)
	for n := 1.0; n < 30; n++ {
		term.Quo(term.Mul(term, y), bigFloat(n))
		sum.Add(sum, term)
	}
	for range k {
		sum.Mul(sum, sum)
	}
	return sum
}

// ulps is how far got lies from want, in units of got's last place.
func ulps(got float64, want *big.Float) float64 {
	unit := math.Nextafter(math.Abs(got), math.Inf(1)) - math.Abs(got)
	d, _ := new(big.Float).Sub(bigFloat(got), want).Float64()
	return math.Abs(d) / unit
}

// exp and ln against 200-bit arithmetic: exp within 0.8 of the last place and
// ln within 0.9, over the whole range and where log-odds are.
func TestExpAndLnAreAccurate(t *testing.T) {
	random := rand.New(rand.NewPCG(1, 2))
	worst, where := 0.0, 0.0
	for i := range 6000 {
		x := random.Float64()*1400 - 700
		if i%2 == 0 {
			x = random.Float64()*40 - 20
		}
		if d := ulps(exp(x), bigExp(x)); d > worst {
			worst, where = d, x
		}
	}
	if worst > 0.8 {
		t.Errorf("exp(%v) is %.3f off in the last place", where, worst)
	}
	// ln x = y + (x·e^-y - 1) - … for y near it: one step of Newton's from ours
	// is as good as 200 bits need, because the error is squared.
	worst = 0
	for i := range 3000 {
		x := math.Exp(random.Float64()*100 - 50)
		if i%2 == 0 {
			x = random.Float64()*1.5 + 0.5
		}
		y := ln(x)
		step := new(big.Float).Sub(new(big.Float).Mul(bigFloat(x), bigExp(-y)), bigFloat(1))
		half := new(big.Float).Quo(new(big.Float).Mul(step, step), bigFloat(2))
		exact := new(big.Float).Sub(new(big.Float).Add(bigFloat(y), step), half)
		if d := ulps(y, exact); d > worst {
			worst, where = d, x
		}
	}
	if worst > 0.9 {
		t.Errorf("ln(%v) is %.3f off in the last place", where, worst)
	}
}

// Known values (any table), and the ends.
func TestExpAndLnKnown(t *testing.T) {
	for _, c := range []struct{ got, want float64 }{
		{exp(0), 1}, {exp(math.Copysign(0, -1)), 1},
		{exp(-708.5), 0}, {exp(709.5), math.Inf(1)}, {exp(math.Inf(-1)), 0}, {exp(math.Inf(1)), math.Inf(1)},
		{ln(1), 0}, {ln(2), 0.6931471805599453}, {ln(10), 2.302585092994046}, {ln(0.5), -0.6931471805599453},
		{ln(1e-300), -690.7755278982137}, {ln(math.MaxFloat64), 709.782712893384}, {ln(5e-324), -744.4400719213812},
		{Logit(0.5), 0}, {Logit(0), math.Inf(-1)}, {Logit(1), math.Inf(1)}, {PD(0).LogOdds(), math.Inf(-1)},
	} {
		if c.got != c.want {
			t.Errorf("%.17g, want %.17g", c.got, c.want)
		}
	}
	if !math.IsNaN(exp(math.NaN())) {
		t.Error("exp of no number")
	}
}

// "The logistic curve is steep between -2 and +2 and flat beyond": PD 11.9 %
// and 88.1 % there (common practice, and arithmetic); and the ends.
func TestPDOfLogOdds(t *testing.T) {
	for l, want := range map[LogOdds]PD{
		-2 * LogOddsOne: 119_202_922, 2 * LogOddsOne: 880_797_078, 0: PDOne / 2, 1: PDOne / 2, 3: PDOne/2 + 1, -3: PDOne/2 - 1,
		-20 * LogOddsOne: 2, -22 * LogOddsOne: 0, 22 * LogOddsOne: PDOne, largestLogOdds: PDOne, -largestLogOdds: 0,
		64 * largestLogOdds: PDOne, -64 * largestLogOdds: 0,
	} {
		if got := l.PD(); got != want {
			t.Errorf("PD of %v is %v, want %v", l, got, want)
		}
	}
	before := PD(0)
	for l := -21 * LogOddsOne; l <= 21*LogOddsOne; l += 12_345_678 {
		if l.PD() < before {
			t.Fatalf("PD falls at %v", l)
		}
		before = l.PD()
	}
}

// The same bits on every processor: a digest of many figures, which a fused
// product anywhere among them changes. app/test.sh runs it for processors
// without and with fused arithmetic (GOAMD64=v1 and v3).
func TestFiguresAreTheSameEverywhere(t *testing.T) {
	const golden = "a950d23afe1a2babd74c54753f397507"
	h := sha256.New()
	add := func(figures ...float64) {
		for _, f := range figures {
			binary.Write(h, binary.LittleEndian, math.Float64bits(f))
		}
	}
	random := rand.New(rand.NewPCG(3, 4))
	e := compiled(t, scorecardOf(t, sample))
	a := sampleAnswers(t, e)
	years := e.byCode["years"]
	for range 20_000 {
		x := random.Float64()*60 - 30
		l := LogOdds(x * 1e9)
		add(exp(x), exp(x*20), ln(exp(x)), ln(random.Float64()*100), logistic(x), Logit(random.Float64()), l.PD().LogOdds())
		add(float64(l.PD()), float64(e.ScoreOf(l)), float64(e.Points(l)))
		a.Put(years, Answer{State: Given, Number: Number(random.Int64N(20_000_000))})
		low, high, _ := e.Range(a)
		se, _ := e.StandardError(a)
		r, _ := e.Score(a)
		add(float64(low), float64(high), se, float64(r.PD), float64(r.Score))
	}
	if got := hex.EncodeToString(h.Sum(nil)[:16]); got != golden {
		t.Errorf("the figures' digest is %s, want %s", got, golden)
	}
}

// Nor does the compiler find a product to fuse for a processor that is not
// here: it is asked for its instructions.
func TestNothingIsFused(t *testing.T) {
	fused := regexp.MustCompile(`(?m)^.*\b(VFN?M(ADD|SUB)\w*|FN?M(ADD|SUB)[DS])\t.*$`)
	for _, processor := range []string{"GOARCH=arm64", "GOARCH=amd64 GOAMD64=v3"} {
		build := exec.Command("go", "build", "-gcflags=-S", ".")
		build.Env = append(os.Environ(), append(strings.Fields(processor), "CGO_ENABLED=0")...)
		code, err := build.CombinedOutput()
		if err != nil || !strings.Contains(string(code), "model.exp") {
			t.Fatalf("%s: %v\n%.1000s", processor, err, code)
		}
		for _, line := range fused.FindAllString(string(code), -1) {
			t.Errorf("%s: %s", processor, strings.TrimSpace(line))
		}
	}
}
