/** Where the work of a long command is done: in this thread, or handed in by Node as a pool of workers. */

/** Answers questions; which thread does so cannot change an answer. */
export interface Engine<Question, Answer> {
  /**
   * Answers all questions.
   * @param affinity word of a question; those of the same word are best answered by the same thread
   * @param done     told each answer as it arrives, in any order
   * @returns answers in the order of the questions
   */
  answerAll(
    questions: readonly Question[],
    affinity: (question: Question, index: number) => string,
    done?: (answer: Answer, index: number) => void,
  ): Promise<Answer[]>;
}

/** An engine of one thread that answers one question after the other. */
export function singleThread<Question, Answer>(
  answer: (question: Question) => Answer | Promise<Answer>,
): Engine<Question, Answer> {
  return {
    async answerAll(questions, _affinity, done) {
      const answers: Answer[] = [];
      for (const [index, question] of questions.entries()) {
        const found = await answer(question);
        answers.push(found);
        done?.(found, index);
      }
      return answers;
    },
  };
}
