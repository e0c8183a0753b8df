(** * Endless claims: a sweep with a window

    The vertices of a long graph stand in a row, the _body_; some others, the _fixed_ ones,
    are kept until the end. An edge between two vertices of the body leads at most [width]
    places further. So when a vertex of the body is swept, all that counts are the fixed vertices
    and the next [width] of the body: the _window_. Names are given afresh after each step:
    1, ..., k are the fixed vertices, k + 1, k + 2, ... the window. Then equal parts of the row
    make equal steps, wherever they are. *)

From Coq Require Import Bool List Arith PArith FMapPositive.
From Certify Require Import Statement Question Normal Edges Facts Sweep SweepChain.
Import ListNotations.

(** What there is to know about a vertex that is swept: how the number of vertices after it
    compares with [width], and the names of its neighbours to come. *)
Definition item : Type := comparison * list vertex.

Section Plan.

Context {A : Type}.
Variable meet : A -> A -> bool.
Variable fixed : list A.
Variable width : nat.

(** The name of the vertex that is swept. *)
Definition first_name : vertex := Pos.of_succ_nat (length fixed).

Definition window (rest : list A) : list (vertex * A) :=
  number 1%positive fixed ++ number (Pos.succ first_name) (firstn width rest).

Definition neighbour_names (b : A) (rest : list A) : list vertex :=
  map fst (filter (fun p => meet b (snd p)) (window rest)).

Fixpoint plan (body : list A) : list item :=
  match body with
  | [] => []
  | b :: rest => (Nat.compare (length rest) width, neighbour_names b rest) :: plan rest
  end.

(** In the beginning every vertex that has a name is a piece. *)
Definition start (body : list A) : state :=
  map (fun p => alone (fst p)) (number 1%positive (fixed ++ firstn width body)).

End Plan.

Section Run.

Variable first : vertex.
Variable width : nat.

(** The names after a step. The vertex that was swept is not the end of a piece any more. *)
Definition lower (x : vertex) : vertex := if (x <? first)%positive then x else Pos.pred x.

Definition lower_state (s : state) : state := map (fun e => (lower (fst e), lower (snd e))) s.

Definition settled (s : state) : bool := forallb (fun e => negb (touches first e)) s.

(** If [width] vertices or more are left, the next one gets a name now; if no more are left,
    all have been reached. *)
Definition new_names (room : comparison) : list vertex :=
  match room with
  | Lt => []
  | _ => [Pos.of_nat (Pos.to_nat first + width)]
  end.

Definition none_apart (room : comparison) : bool :=
  match room with
  | Gt => false
  | _ => true
  end.

Definition take_step (i : item) (s : state) : list state :=
  map lower_state (filter settled
    (advance first (none_apart (fst i)) (new_names (fst i)) (map (fun u => (u, false)) (snd i)) s)).

Definition gather (f : state -> list state) (ss : list state) : list state :=
  snd (fold_left (fun c s => fold_left collect (f s) c) ss (PositiveMap.empty _, [])).

Fixpoint run (items : list item) (ss : list state) : list state :=
  match items with
  | [] => ss
  | i :: later => run later (gather (take_step i) ss)
  end.

End Run.

(** ** The answer

    After the body the fixed vertices are left, with no others: they are swept as a body of
    their own. If the empty state is there at the end, a cycle has been completed. *)

Definition completed (ss : list state) : bool :=
  existsb (fun s : state => match s with [] => true | _ => false end) ss.

(** The sweep of the [k] fixed vertices, by their plan, from the states that the body has left. *)
Definition finish (k : nat) (last_items : list item) (ss : list state) : bool :=
  completed (run 1%positive k last_items ss).

(** Whether there is a tour of all vertices (EndlessTour.v). *)
Definition answer {A : Type} (meet : A -> A -> bool) (fixed : list A) (width : nat)
    (body : list A) : bool :=
  finish (length fixed) (plan meet [] (length fixed) fixed)
    (run (first_name fixed) width (plan meet fixed width body) [start fixed width body]).
