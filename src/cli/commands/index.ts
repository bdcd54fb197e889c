/** The commands, in the order of their help. */
import type { Question } from "../command.js";
import { assessQuestion } from "./assess.js";
import { averagesQuestion } from "./averages.js";
import { conditionsQuestion } from "./conditions.js";
import { growthQuestion } from "./growth.js";
import { lawQuestion } from "./law.js";
import { orbitsQuestion } from "./orbits.js";
import { startQuestion } from "./start.js";
import { trajectoryQuestion } from "./trajectory.js";

export const QUESTIONS = [
  assessQuestion,
  conditionsQuestion,
  growthQuestion,
  startQuestion,
  trajectoryQuestion,
  averagesQuestion,
  lawQuestion,
  orbitsQuestion,
] as unknown as readonly Question[];
