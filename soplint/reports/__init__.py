"""Reports: text is made here, at the edge, from reviews that carry spans and typed values.

``outcome`` holds everything that a run knows (reviews, files not reviewed, settings, date) and
sums it up; ``text``, ``lines`` and ``record`` turn it into the three forms of ``review --as``;
``worksheet`` lists every quantity of one document.  ``inert`` takes the life out of control
characters before anything from a document or a file name reaches a terminal.
"""
