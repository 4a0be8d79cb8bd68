import type { WarmUpBlock } from "./types.ts";

/**
 * The club's neuromuscular warm-up in our own words. Its ingredients are those of published programmes: running,
 * strength, plyometrics, balance and agility with feedback on technique (PMC5800728; Petushek, PMC6592422), about
 * 15 minutes at least twice a week with attention to the line of the knee (Waldén). The cues about the knee over
 * the foot and the soft landing are common practice.
 */
export type ProgrammeExercise = {
  key: string;
  name: string;
  dose: string;
  /** From the first to the hardest. */
  progressions: string[];
  cue: string;
};
export type ProgrammeBlock = {
  block: WarmUpBlock;
  name: string;
  minutes: number;
  exercises: ProgrammeExercise[];
};
export type Programme = { key: string; name: string; targetMinutes: number; blocks: ProgrammeBlock[] };

export const PROGRAMME: Programme = {
  key: "marram-warm-up",
  name: "Marram Bay warm-up",
  targetMinutes: 15,
  blocks: [
    {
      block: "running",
      name: "Running preparation",
      minutes: 3,
      exercises: [
        {
          key: "easy-run",
          name: "Easy run out and back",
          dose: "2 lengths of 20 m",
          progressions: [
            "Forwards, in pairs",
            "Forwards out, backwards home",
            "With a half turn at each cone",
          ],
          cue: "Run tall and stay quiet on your feet.",
        },
        {
          key: "hip-gate",
          name: "Knee lift, open and close",
          dose: "5 each leg over 20 m",
          progressions: ["Walking", "Skipping", "Skipping with a partner's signal for which leg"],
          cue: "Keep the standing knee over the foot while the other leg swings.",
        },
        {
          key: "side-shuffle",
          name: "Side shuffle",
          dose: "2 lengths of 10 m each way",
          progressions: ["Slow, low hips", "Faster, touch the line", "Mirror a partner"],
          cue: "Sit down a little and do not let the knees fall together.",
        },
      ],
    },
    {
      block: "strength",
      name: "Strength",
      minutes: 4,
      exercises: [
        {
          key: "front-plank",
          name: "Front plank",
          dose: "2 times 20 seconds",
          progressions: ["On the knees", "On the toes", "On the toes, lifting one foot at a time"],
          cue: "Make one straight line from head to heels.",
        },
        {
          key: "kneeling-lean",
          name: "Kneeling forward lean",
          dose: "5 times, slowly",
          progressions: [
            "A small lean, partner holds the heels",
            "As far as you can hold it",
            "8 slow leans",
          ],
          cue: "Lean from the knees with straight hips, and brake with the back of the thighs.",
        },
        {
          key: "split-squat",
          name: "Lunge on the spot",
          dose: "6 each leg",
          progressions: ["Hands on hips", "Walking lunges", "Walking lunges with a turn of the chest"],
          cue: "Front knee over the foot, never inside it.",
        },
      ],
    },
    {
      block: "jumping_landing",
      name: "Jumping and landing",
      minutes: 3,
      exercises: [
        {
          key: "stick-landing",
          name: "Jump and hold",
          dose: "6 jumps, hold each for 2 seconds",
          progressions: ["Up and down on the spot", "Forwards over a line", "With a quarter turn in the air"],
          cue: "Land soft and on both legs, hips and knees bent.",
        },
        {
          key: "side-hop",
          name: "Sideways hop",
          dose: "5 each leg",
          progressions: [
            "Two feet over a line",
            "One foot, hold the landing",
            "One foot, two hops then hold",
          ],
          cue: "Make no noise when you land and keep the knee over the foot.",
        },
        {
          key: "jump-for-ball",
          name: "Jump for a ball",
          dose: "5 times",
          progressions: [
            "Ball held up by a partner",
            "Ball thrown gently",
            "Ball thrown with a light push at the shoulder",
          ],
          cue: "Eyes on the ball, then land on two feet before you move on.",
        },
      ],
    },
    {
      block: "balance",
      name: "Balance",
      minutes: 2,
      exercises: [
        {
          key: "one-leg-pass",
          name: "One leg with a ball",
          dose: "30 seconds each leg",
          progressions: [
            "Ball round the waist",
            "Pass with a partner",
            "Pass with eyes on a third player's fingers",
          ],
          cue: "Bend the standing knee a little and keep the hips level.",
        },
        {
          key: "balance-duel",
          name: "Balance duel",
          dose: "20 seconds each leg",
          progressions: ["Palms touching, no push", "Small pushes", "Small pushes on a soft surface"],
          cue: "Stay over the middle of your foot; if you wobble, bend rather than lock the knee.",
        },
      ],
    },
    {
      block: "cutting_planting",
      name: "Cutting and planting",
      minutes: 3,
      exercises: [
        {
          key: "plant-and-go",
          name: "Plant and go",
          dose: "4 each side",
          progressions: ["Half speed at a cone", "Three-quarter speed", "On a partner's late signal"],
          cue: "Short steps before you turn, foot under you, knee pointing where the toes point.",
        },
        {
          key: "run-and-brake",
          name: "Run and brake",
          dose: "4 times over 15 m",
          progressions: ["Stop in five steps", "Stop in three steps", "Stop in three steps and go backwards"],
          cue: "Sink the hips to slow down; do not stop on one straight leg.",
        },
        {
          key: "zigzag",
          name: "Zigzag through cones",
          dose: "2 runs of 6 cones",
          progressions: ["Without a ball", "With a ball", "With a ball and a chaser"],
          cue: "Push off from outside the foot and keep the trunk over it.",
        },
      ],
    },
  ],
};
