"""Step 16: a strange board's findings in, the text of its first project file out."""

from rcrules.starter._questions import MOST_QUESTIONS, Question, questions
from rcrules.starter._text import FIRST_PACKS, project_text

__all__ = ["FIRST_PACKS", "MOST_QUESTIONS", "Question", "project_text", "questions"]
