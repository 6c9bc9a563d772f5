package proof

import (
	"fmt"
	"math"

	"padproof/analysis"
	"padproof/cmd/padproof/internal/result"
)

const (
	// Another channel this much below the strongest might be the right one.
	nearChannelDB = 20
)

// pickChannel settles the channel of a take: the one asked for, else the one
// with the strongest tone. Another channel within 20 dB of it whose level is
// further off than channels of this rig may differ leaves it open which is
// meant, and that is an error that asks for --channel.
func (t *take) pickChannel(asked int, atHz []float64, matchDB float64) error {
	switch {
	case asked > t.facts.Channels:
		return &result.Error{File: t.path, Text: fmt.Sprintf("there is no channel %d among %d", asked, t.facts.Channels), Hint: "name one that is there, with --channel, or in lot.toml where that names the channels; they count from 1"}
	case asked > 0:
		t.use(asked)
		return nil
	case t.facts.Channels == 1:
		t.use(1)
		return nil
	}
	levels, err := t.toneLevels(atHz)
	if err != nil {
		return err
	}
	best := loudest(levels)
	if atHz == nil && !math.IsInf(levels[best], -1) {
		// Another channel counts by what it holds of this one's tone, not by its own hum.
		if stretches, err := analysis.FindTones(t.file.Channel(best + 1)); err == nil {
			if levels, err = t.toneLevels(frequencies(stretches)); err != nil {
				return err
			}
			best = loudest(levels)
		}
	}
	for i, l := range levels {
		if i != best && levels[best]-l < nearChannelDB && levels[best]-l > matchDB {
			return &result.Error{
				File: t.path,
				Text: fmt.Sprintf("channel %d holds the tone at %.1f dBFS and channel %d at %.1f dBFS: which is meant is not clear", best+1, levels[best], i+1, l),
				Hint: fmt.Sprintf("name it: --channel %d or --channel %d", best+1, i+1),
			}
		}
	}
	t.use(best + 1)
	return nil
}

func loudest(levels []float64) int {
	best := 0
	for i, l := range levels {
		if l > levels[best] {
			best = i
		}
	}
	return best
}

func frequencies(stretches []analysis.Stretch) []float64 {
	var freqs []float64
	for _, s := range stretches {
		freqs = append(freqs, s.FreqHz)
	}
	return freqs
}

// toneLevels is the level of the tone in each channel, -Inf where there is none.
func (t *take) toneLevels(atHz []float64) ([]float64, error) {
	var all []analysis.Samples
	for n := 1; n <= t.facts.Channels; n++ {
		all = append(all, t.file.Channel(n))
	}
	levels, err := analysis.ToneLevels(all, atHz)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", t.path, err)
	}
	for i, l := range levels {
		if math.IsNaN(l) {
			levels[i] = math.Inf(-1)
		}
	}
	return levels, nil
}

// followChannel gives a take the channel of the one before it. A tone that
// stands in another channel alone is an error: takes of one unit are of one
// channel.
func (t *take) followChannel(first *take, asked int, atHz []float64, matchDB float64) error {
	if asked > 0 {
		return t.pickChannel(asked, atHz, matchDB)
	}
	if first.channel > t.facts.Channels {
		return &result.Error{
			File: t.path,
			Text: fmt.Sprintf("the tone of %s is in channel %d, and there are only %d here", first.path, first.channel, t.facts.Channels),
			Hint: fmt.Sprintf("record both takes with one set-up, or export channel %d of %s as a file of its own", first.channel, first.path),
		}
	}
	if err := t.pickChannel(0, atHz, matchDB); err != nil {
		return err
	}
	if t.channel == first.channel {
		return nil
	}
	levels, err := t.toneLevels(atHz)
	if err != nil {
		return err
	}
	if here, there := levels[first.channel-1], levels[t.channel-1]; there-here > matchDB {
		return &result.Error{
			File: t.path,
			Text: fmt.Sprintf("the tone is in channel %d here and in channel %d of %s", t.channel, first.channel, first.path),
			Hint: fmt.Sprintf("record both takes through one channel; if this is the same input after all, export channel %d of this take as a file of its own", t.channel),
		}
	}
	t.use(first.channel)
	return nil
}
