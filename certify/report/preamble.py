r"""What stands around an appendix in LaTeX, so that it compiles on its own and can be \input."""

OPENING = r"""% TITLE
%
% This file compiles on its own with pdflatex (run it twice), and a paper can read it with
% \input. How it knows: LaTeX lets \@nodocument be \relax at \begin{document} and not
% before. So when it is, we are inside a paper, and the preamble below is skipped. Such
% a paper needs
%   \usepackage{amsmath,amsthm,longtable,tikz}
% in its own preamble. All commands defined here begin with "evidence"; they are defined only if
% they are not there yet, so several such files can be read, and a paper can give them its
% own look by defining them before.
\expandafter\ifx\csname @nodocument\endcsname\relax
  \def\evidencebegin{\begingroup}
  \def\evidenceend{\par\endgroup}
\else
  \documentclass[11pt,a4paper]{article}
  \usepackage{amsmath,amsthm,longtable,tikz,microtype}
  \usepackage[hidelinks]{hyperref}
  \def\evidencebegin{\begin{document}\appendix}
  \def\evidenceend{\end{document}}
\fi
\ifdefined\evidencetheorem\else
  \theoremstyle{definition}
  \newtheorem{evidencedefinition}{Definition}
  \theoremstyle{plain}
  \newtheorem{evidencetheorem}[evidencedefinition]{Theorem}
  \newtheorem{evidenceproposition}[evidencedefinition]{Proposition}
\fi
\ifdefined\evidencecase\else
  % A case of a proof: depth, label, text.
  \newcommand{\evidencecase}[3]{\par\begingroup\advance\leftskip by #1em
    \noindent\if\relax\detokenize{#2}\relax\else\textit{#2}\enspace\fi#3\par\endgroup}
\fi
\ifdefined\evidencerows\else
  % A list of short heads and their contents: depth, widest head.
  \newenvironment{evidencerows}[2]{\begin{list}{}{\settowidth{\labelwidth}{#2}%
    \setlength{\labelsep}{1em}\setlength{\leftmargin}{\labelwidth}%
    \addtolength{\leftmargin}{2em}\addtolength{\leftmargin}{#1em}%
    \setlength{\itemsep}{2pt plus 1pt}\setlength{\parsep}{0pt}%
    \renewcommand{\makelabel}[1]{##1\hfil}}\raggedright}{\end{list}}
\fi
\ifdefined\evidencefigure\else
  \newsavebox{\evidencebox}
  % A floating figure: caption with its label; smaller than drawn if the column is narrow.
  \newenvironment{evidencefigure}[1]{\begin{figure}[!htbp]\centering
    \def\evidencecaption{\caption{#1}}\begin{lrbox}{\evidencebox}}{\end{lrbox}%
    \ifdim\wd\evidencebox>\linewidth\resizebox{\linewidth}{!}{\usebox{\evidencebox}}%
    \else\usebox{\evidencebox}\fi\evidencecaption\end{figure}}
\fi
\ifdefined\evidencegrid\else
  \newenvironment{evidencegrid}{\par\medskip\noindent
    \begin{minipage}{\linewidth}\centering\setlength{\tabcolsep}{4pt}}%
    {\end{minipage}\par\medskip}
  \newcommand{\evidencetablecaption}[1]{\par\smallskip\refstepcounter{table}%
    {\small\textbf{Table~\thetable.} #1\par}}
\fi
\evidencebegin
\emergencystretch=3em
\setlength{\LTcapwidth}{\linewidth}
% No page ends between a statement and its proof, or a list and what introduces it.
\csname @beginparpenalty\endcsname=10000
\def\evidencestay{\csname @endparpenalty\endcsname=10000 }
"""
"""TITLE stands for the title, in a comment."""

CLOSING = r"""\evidenceend
"""
