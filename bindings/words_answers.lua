-- SPDX-License-Identifier: GPL-3.0-or-later
-- What help, completion and the manual tell of words that have to do with answers.
return {
  {
    name = "more",
    subject = "session",
    forms = { "more()" },
    does = "The rest of an answer that was longer than the screen. At a terminal the prompt prints a screenful at once and says how many lines are left; "
      .. "print and scripts always write the whole.",
    arguments = {},
    result = "the rest, printed a screenful at once again",
    errors = "there is no more to show",
    examples = {},
    answers = {},
  },
}
