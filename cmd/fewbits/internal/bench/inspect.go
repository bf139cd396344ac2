package bench

import (
	"context"
)

// Inspect surveys recordings without coding them. All refused is an error.
func Inspect(ctx context.Context, plan Plan) ([]Clip, []Refusal, error) {
	e := newEngine(ctx, plan)
	surveys, refused, err := e.openAll(plan.Inputs, map[string]bool{})
	if err != nil {
		return nil, nil, err
	}
	defer closeAll(surveys)
	if len(surveys) == 0 {
		return nil, nil, noneLeft(refused)
	}
	clips := make([]Clip, len(surveys))
	for i, s := range surveys {
		clips[i] = s.clip
	}
	return clips, refused, nil
}
