"""What callers send and get: quantities, questions, answers, and the way from questions to SI and back.

No HTTP and no physics live here. A question is read into the structs of ``calc``; an answer is written from
them.
"""
