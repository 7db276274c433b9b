/** What every finding about the safety of people says of itself. */
export const hintOnly = "This is a hint: local codes and licensed, qualified people decide.";
