package compare

import (
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/compare/uncertainty"
)

// A ResponseCase is all that a response, or a flatness, is judged by.
type ResponseCase struct {
	Points []analysis.ResponsePoint // in order of frequency

	// DesignedDB is the loss that the drawing gives on the bench. ServiceDB is the same in service,
	// for flatness.
	DesignedDB func(freqHz float64) float64
	ServiceDB  func(freqHz float64) float64

	ToneHz       float64 // where both curves are taken as 0: the point nearest to it
	FromHz, ToHz float64
	PlusMinusDB  float64 // the limit; 0 or less is none
	Rule         Rule

	LinearityDB float64 // half-width: largest error of a level difference

	// RigTerms are what the rig's impedances leave open of the designed loss at a frequency less that
	// at the tone, in dB; nil for none.
	RigTerms func(freqHz, toneHz float64) []uncertainty.Term
}

// A ResponseDeviation is one point of a response, judged. Losses are relative to the tone.
type ResponseDeviation struct {
	FreqHz      float64
	MeasuredDB  float64 // bench loss, or for flatness the service loss worked out
	ExpectedDB  float64 // what the drawing gives; for flatness 0, the level line
	DeviationDB float64 // MeasuredDB less ExpectedDB
	UDB         float64 // expanded, of DeviationDB
}

// A ResponseFinding is a response, or a flatness, judged.
type ResponseFinding struct {
	// The point that speaks for the verdict: for Fail the one furthest outside, else the largest
	// deviation. Budget is its.
	DeviationDB, AtHz, UDB float64
	Budget                 uncertainty.Budget

	Verdict Verdict
	Reason  string // for Unproven
	Points  []ResponseDeviation

	// Where the loss has risen by 3.01 dB (half the power) from that at the tone; NaN where it
	// has not within the points.
	LowCornerHz, HighCornerHz float64
}

const (
	halfPowerDB = 3.0102999566398120 // 10 lg 2

	// A point is within the range up to half a point's step beyond; a steady tone stands for an end of
	// it within a sixth of an octave, and for what lies up to a decade off.
	halfStep = 1.0292005271944281 // 10^(1/80)
	toneEnd  = 1.1220184543019633 // 10^(1/20)
	toneGap  = 10.1

	// Of all points together, a sound unit on the limit fails by chance in so many cases.
	familyRisk = 0.05
)

// JudgeResponse holds the measured response against the designed one, both taken as 0 at the tone,
// each designed point averaged over the band of the measured one. Each point is judged by its own
// uncertainty: noise of the point and of the tone's, linearity, and what the rig leaves open.
//
// Pass needs every point to pass by [Decide], and points that cover the range: all of it from bands,
// or from steady tones both ends and one in every decade. No allowance for their number is needed: a
// unit with one point on its limit passes no oftener than that point alone would (an
// intersection-union test; R. L. Berger, Technometrics 24, 1982; from memory). Fail under Guarded needs
// one point outside its limit by more than U at a coverage of 1 - 0.05/n, n the number of points
// (Bonferroni), since among many points noise alone puts the largest 3 or 4 standard uncertainties
// off. Under Shared a point fails at the limit, as there U is small beside it.
//
// An error comes from a term of a budget that is none.
func JudgeResponse(k ResponseCase) (ResponseFinding, error) { return k.judge(nil) }

// JudgeFlatness is JudgeResponse for the response in service against a level line: the designed
// service curve with the bench's deviation from its designed one added, 0 at the tone.
func JudgeFlatness(k ResponseCase) (ResponseFinding, error) { return k.judge(k.ServiceDB) }

func (k ResponseCase) judge(service func(freqHz float64) float64) (ResponseFinding, error) {
	none := ResponseFinding{
		DeviationDB: math.NaN(), AtHz: math.NaN(), UDB: math.NaN(), Verdict: None,
		LowCornerHz: math.NaN(), HighCornerHz: math.NaN(),
	}
	tone, ok := k.tone()
	if !ok {
		if k.PlusMinusDB > 0 {
			none.Verdict, none.Reason = Unproven, fmt.Sprintf("there is no point of the response at the tone of %.4g Hz", k.ToneHz)
		}
		return none, nil
	}
	j := responseJudge{ResponseCase: k, service: service, tone: tone, f: none}
	for _, p := range k.Points {
		if p.FreqHz*halfStep < k.FromHz || p.FreqHz > k.ToHz*halfStep {
			continue
		}
		j.judged = append(j.judged, p)
	}
	for _, p := range j.judged {
		if err := j.point(p); err != nil {
			return none, err
		}
	}
	j.conclude()
	return j.f, nil
}

// tone returns the point nearest to the tone; one made of a band must hold it or touch it.
func (k ResponseCase) tone() (analysis.ResponsePoint, bool) {
	var best analysis.ResponsePoint
	nearest := math.Inf(1)
	for _, p := range k.Points {
		if off := math.Abs(math.Log(p.FreqHz / k.ToneHz)); off < nearest {
			best, nearest = p, off
		}
	}
	return best, nearest <= math.Log(toneEnd) || nearest < math.Inf(1) && isTone(best)
}

func isTone(p analysis.ResponsePoint) bool { return p.LowHz == p.HighHz }

// A responseJudge gathers a finding point by point.
type responseJudge struct {
	ResponseCase
	service  func(freqHz float64) float64
	tone     analysis.ResponsePoint
	judged   []analysis.ResponsePoint
	f        ResponseFinding
	failedBy float64 // how far the furthest that fails lies outside; 0 for none
	openBy   float64 // how much the worst that is unproven lacks
	open     string
}

func (j *responseJudge) point(p analysis.ResponsePoint) error {
	d := ResponseDeviation{FreqHz: p.FreqHz}
	measured := p.LossDB - j.tone.LossDB
	designed := bandLossDB(j.DesignedDB, p) - bandLossDB(j.DesignedDB, j.tone)
	d.MeasuredDB, d.ExpectedDB, d.DeviationDB = measured, designed, measured-designed
	if j.service != nil {
		d.MeasuredDB = bandLossDB(j.service, p) - bandLossDB(j.service, j.tone) + measured - designed
		d.ExpectedDB, d.DeviationDB = 0, d.MeasuredDB
	}
	budget := j.budget(p)
	var err error
	if d.UDB, err = budget.ExpandedU(Coverage); err != nil {
		return err
	}
	outsideUDB, err := budget.ExpandedU(1 - familyRisk/float64(len(j.judged)))
	if err != nil {
		return err
	}
	j.f.Points = append(j.f.Points, d)
	j.enter(d, budget, outsideUDB)
	return nil
}

// budget is that of a point's deviation; at the tone itself there is none.
func (j *responseJudge) budget(p analysis.ResponsePoint) uncertainty.Budget {
	if p.FreqHz == j.tone.FreqHz {
		return uncertainty.Budget{}
	}
	b := uncertainty.Budget{Terms: []uncertainty.Term{
		uncertainty.FromNormal("noise of the point", p.StandardUDB, 1),
		uncertainty.FromNormal("noise at the tone", j.tone.StandardUDB, -1),
	}}
	if j.LinearityDB > 0 {
		b.Terms = append(b.Terms, uncertainty.FromRectangle("linearity", j.LinearityDB, 1))
	}
	if j.RigTerms != nil {
		b.Terms = append(b.Terms, j.RigTerms(p.FreqHz, j.tone.FreqHz)...)
	}
	return b
}

// enter decides on a point and keeps what speaks for the whole.
func (j *responseJudge) enter(d ResponseDeviation, budget uncertainty.Budget, outsideUDB float64) {
	limit := j.limit()
	verdict, reason := Decide(j.Rule, d.DeviationDB, d.UDB, limit, 0)
	beyondDB := math.Abs(d.DeviationDB) - j.PlusMinusDB
	if verdict == Fail && j.Rule != Shared && beyondDB <= outsideUDB {
		verdict, reason = Unproven, fmt.Sprintf("%.2g dB outside the limit, not more than the %.2g dB that the largest of %d points may be off by chance", beyondDB, outsideUDB, len(j.judged))
	}
	speaks := math.IsNaN(j.f.AtHz) || math.Abs(d.DeviationDB) > math.Abs(j.f.DeviationDB)
	switch {
	case verdict == Fail:
		speaks = j.failedBy == 0 || beyondDB > j.failedBy
		j.failedBy = math.Max(j.failedBy, beyondDB)
	case j.failedBy > 0:
		speaks = false
	}
	if speaks && !math.IsNaN(d.DeviationDB) {
		j.f.DeviationDB, j.f.AtHz, j.f.UDB, j.f.Budget = d.DeviationDB, d.FreqHz, d.UDB, budget
	}
	if lacks := beyondDB + d.UDB; verdict == Unproven && (j.open == "" || lacks > j.openBy) {
		j.openBy, j.open = lacks, fmt.Sprintf("at %.4g Hz: %s", d.FreqHz, reason)
	}
}

func (j *responseJudge) limit() Limit {
	if !(j.PlusMinusDB > 0) || math.IsInf(j.PlusMinusDB, 1) {
		return NoLimit()
	}
	return PlusMinus(0, j.PlusMinusDB)
}

func (j *responseJudge) conclude() {
	j.f.LowCornerHz, j.f.HighCornerHz = j.corners()
	gap := j.gap()
	switch {
	case !j.limit().IsSet():
		j.f.Verdict = None
	case j.failedBy > 0:
		j.f.Verdict = Fail
	case j.open != "":
		j.f.Verdict, j.f.Reason = Unproven, j.open
	case gap != "":
		j.f.Verdict, j.f.Reason = Unproven, gap
	default:
		j.f.Verdict = Pass
	}
}

// gap says where the range is not covered, or "".
func (j *responseJudge) gap() string {
	const from = "the response from %.4g to %.4g Hz is not shown; record the whole test signal at a rate that reaches it, with more level over noise and hum, or set response_from_hz and response_to_hz to what is asked for"
	const slack = 1 + 1e-6
	reach := j.FromHz * slack
	for i, p := range j.judged {
		low, high := p.LowHz, p.HighHz
		if isTone(p) {
			low, high = p.FreqHz/toneGap, p.FreqHz
			if i == 0 {
				low = p.FreqHz / toneEnd
			}
		}
		if low > reach*slack {
			return fmt.Sprintf(from, reach, low)
		}
		reach = math.Max(reach, high)
		if isTone(p) && reach*toneEnd >= j.ToHz {
			reach = math.Max(reach, j.ToHz)
		}
	}
	if reach*slack < j.ToHz {
		return fmt.Sprintf(from, reach, j.ToHz)
	}
	return ""
}

// corners go outward from the tone until the loss has risen by half the power, and interpolate
// there on a logarithmic scale of frequency.
func (j *responseJudge) corners() (lowHz, highHz float64) {
	at := 0
	for i, p := range j.Points {
		if p.FreqHz == j.tone.FreqHz {
			at = i
		}
	}
	find := func(step int) float64 {
		for i := at; i+step >= 0 && i+step < len(j.Points); i += step {
			a, b := j.Points[i], j.Points[i+step]
			fromDB, toDB := a.LossDB-j.tone.LossDB-halfPowerDB, b.LossDB-j.tone.LossDB-halfPowerDB
			if fromDB < 0 && toDB >= 0 {
				return a.FreqHz * math.Pow(b.FreqHz/a.FreqHz, -fromDB/(toDB-fromDB))
			}
		}
		return math.NaN()
	}
	return find(-1), find(1)
}

// bandLossDB is the loss of a curve averaged over a point's band as the measured one is: amplitudes,
// evenly over the logarithm of frequency (Simpson's rule).
func bandLossDB(lossDB func(freqHz float64) float64, p analysis.ResponsePoint) float64 {
	if isTone(p) || !(p.LowHz > 0 && p.HighHz > p.LowHz) {
		return lossDB(p.FreqHz)
	}
	const steps = 4
	sum := 0.0
	for i := range steps + 1 {
		weight := float64(2 + 2*(i%2))
		if i == 0 || i == steps {
			weight = 1
		}
		freqHz := p.LowHz * math.Pow(p.HighHz/p.LowHz, float64(i)/steps)
		sum += weight * math.Pow(10, -lossDB(freqHz)/20)
	}
	return -20 * math.Log10(sum/(3*steps))
}
