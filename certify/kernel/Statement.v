(** * The statement

    This page is all that has to be read and believed, beside Coq itself: what a graph
    is, what a Hamiltonian path or cycle of it is, and the predicates that a rule may
    use. A theorem made from a certificate says [~ exists h, ham_path Q h] (or
    [ham_cycle]) for a query [Q] that is written out beside it. *)

From Coq Require Import Bool List Permutation Arith.
Import ListNotations.

Section Statement.

(** Vertices are whole numbers, or tuples of whole numbers. *)
Variable V : Type.

(** A graph: its vertices, each once, and which two of them are joined. A query asks
    for a path or cycle through all its vertices; a path may be asked to have given
    ends (one or two), and both may be asked to use some edges, and not to use others. *)
Record query := {
  vertices : list V;
  adjacent : V -> V -> bool;
  ends : list V;
  required : list (V * V);
  forbidden : list (V * V)
}.

Variable Q : query.

(** Two vertices that a path may visit one after the other. *)
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

(** What path and cycle have in common: every vertex once, every step along an edge,
    every required edge among the steps, one way or the other. *)
Definition visits (h : list V) (steps : list (V * V)) : Prop :=
  Permutation h (vertices Q) /\
  (forall u v, In (u, v) steps -> edge u v) /\
  (forall u v, In (u, v) (required Q) -> In (u, v) steps \/ In (v, u) steps).

Definition has_ends (h : list V) : Prop :=
  match ends Q with
  | [] => True
  | [s] => exists t, h = s :: t \/ h = t ++ [s]
  | [s; t] => exists m, h = s :: m ++ [t] \/ h = t :: m ++ [s] \/ (h = [s] /\ s = t)
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
Arguments has_ends {V}.
Arguments ham_path {V}.
Arguments ham_cycle {V}.
