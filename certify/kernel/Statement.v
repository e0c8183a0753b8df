(** * The statement

    This page says what a Hamiltonian path or cycle of a graph is. Beside Coq itself it
    is what has to be read and believed, together with the meaning of the words that a
    rule uses (Rules.v and the lemmas about it in RulesSpec.v). A theorem made from a
    certificate says [~ exists h, ham_path Q h] (or [ham_cycle]) of a query [Q] that is
    written out beside it, or, for a whole table, for which parameters there is one. *)

From Coq Require Import List Permutation.
Import ListNotations.

Section Statement.

(** Vertices are whole numbers, or tuples of whole numbers. *)
Variable V : Type.

(** A query shows a graph: its vertices, each once, and which two of them are joined. It
    asks for a path or cycle through all the vertices; a path may be asked to have
    given ends (one or two), and both may be asked to use some edges, and not to use
    others. *)
Record query := {
  vertices : list V;
  adjacent : V -> V -> bool;
  ends : list V;
  required : list (V * V);
  forbidden : list (V * V)
}.

Variable Q : query.

(** [edge u v]: a path may go on from [u] to [v]. *)
Definition edge (u v : V) : Prop :=
  adjacent Q u v = true /\ ~ In (u, v) (forbidden Q) /\ ~ In (v, u) (forbidden Q).

(** The steps of a path: its pairs of consecutive vertices. A cycle has one step more,
    from its last vertex to its first. *)
Fixpoint path_steps (h : list V) : list (V * V) :=
  match h with
  | u :: (v :: _) as rest => (u, v) :: path_steps rest
  | _ => []
  end.

Definition cycle_steps (h : list V) : list (V * V) :=
  match h with
  | u :: _ => path_steps (h ++ [u])
  | [] => []
  end.

(** What path and cycle have in common: they visit each vertex once, every step is along
    an edge, and every required edge is among the steps, one way or the other. *)
Definition visits (h : list V) (steps : list (V * V)) : Prop :=
  Permutation h (vertices Q) /\
  (forall u v, In (u, v) steps -> edge u v) /\
  (forall u v, In (u, v) (required Q) -> In (u, v) steps \/ In (v, u) steps).

Definition starts (h : list V) (s : V) : Prop := exists rest, h = s :: rest.
Definition stops (h : list V) (t : V) : Prop := exists rest, h = rest ++ [t].

(** The path has the ends asked for; which of them comes first does not matter. *)
Definition has_ends (h : list V) : Prop :=
  match ends Q with
  | [] => True
  | [s] => starts h s \/ stops h s
  | [s; t] => (starts h s /\ stops h t) \/ (starts h t /\ stops h s)
  | _ => False
  end.

Definition ham_path (h : list V) : Prop :=
  h <> [] /\ visits h (path_steps h) /\ has_ends h.

Definition ham_cycle (h : list V) : Prop :=
  3 <= length h /\ visits h (cycle_steps h).

End Statement.

Arguments vertices {V}.
Arguments adjacent {V}.
Arguments ends {V}.
Arguments required {V}.
Arguments forbidden {V}.
Arguments edge {V}.
Arguments path_steps {V}.
Arguments cycle_steps {V}.
Arguments visits {V}.
Arguments starts {V}.
Arguments stops {V}.
Arguments has_ends {V}.
Arguments ham_path {V}.
Arguments ham_cycle {V}.
