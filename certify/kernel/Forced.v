(** * Forced moves

    What follows at once from edges that are used or removed. A move adds only what holds
    for every Hamiltonian cycle that uses the used edges and none of the removed ones:

    - it has two edges at a vertex, so fewer left or three used contradict;
    - with two used at a vertex it has no other edge there;
    - with two left at a vertex it uses both;
    - it has no cycle inside it but itself;
    - so it has no edge that closes a used path before all vertices are on it. *)

From Coq Require Import Bool List PArith Arith FMapPositive.
From Certify Require Import Statement Question Sets Obstruction.
Import ListNotations.

(** [left] has the neighbours along edges that are not removed, [chosen] those along used
    edges. [far] has for the two ends of a used path its other end and its number of
    vertices (a vertex of which it says nothing is a path by itself; what it says of inner
    vertices is out of date and not read). [waiting]: where something changed. *)
Record state := {
  left : PositiveMap.t (list vertex);
  chosen : PositiveMap.t (list vertex);
  far : PositiveMap.t (vertex * positive);
  waiting : list vertex
}.

Definition without (v : vertex) (l : list vertex) : list vertex :=
  filter (fun w => negb (v =? w)%positive) l.

Definition full {A : Type} (l : list A) : bool :=
  match l with _ :: _ :: _ => true | _ => false end.

Definition far_end (m : PositiveMap.t (vertex * positive)) (v : vertex) : vertex * positive :=
  match PositiveMap.find v m with Some p => p | None => (v, 1%positive) end.

Definition is_left (s : state) (u v : vertex) : bool := among v (neighbours (left s) u).

Definition is_chosen (s : state) (u v : vertex) : bool := among v (neighbours (chosen s) u).

Definition is_open (s : state) (u v : vertex) : bool := is_left s u v && negb (is_chosen s u v).

(** The moves give [None] for a contradiction: no Hamiltonian cycle fits. *)
Definition remove (u v : vertex) (s : state) : option state :=
  if negb (is_left s u v) then Some s
  else if is_chosen s u v then None
  else Some {|
    left := PositiveMap.add u (without v (neighbours (left s) u))
              (PositiveMap.add v (without u (neighbours (left s) v)) (left s));
    chosen := chosen s;
    far := far s;
    waiting := u :: v :: waiting s
  |}.

(** The edge itself, with the ends of the path that it is on from now on. *)
Definition choose (u v : vertex) (m : PositiveMap.t (vertex * positive)) (s : state) : state := {|
  left := left s;
  chosen := PositiveMap.add u (v :: neighbours (chosen s) u)
              (PositiveMap.add v (u :: neighbours (chosen s) v) (chosen s));
  far := m;
  waiting := u :: v :: waiting s
|}.

Section Moves.

(** The number of vertices. *)
Variable n : positive.

Definition use (u v : vertex) (s : state) : option state :=
  if is_chosen s u v then Some s
  else if negb (is_left s u v) || full (neighbours (chosen s) u) || full (neighbours (chosen s) v)
  then None
  else
    let (first, before) := far_end (far s) u in
    let (last, after) := far_end (far s) v in
    if (first =? v)%positive then
      if (before <? n)%positive then None else Some (choose u v (far s) s)
    else
      let size := (before + after)%positive in
      let joined := choose u v (PositiveMap.add first (last, size)
                                  (PositiveMap.add last (first, size) (far s))) s in
      if (size <? n)%positive && is_open joined first last then remove first last joined
      else Some joined.

(** One move after the other, as long as there is no contradiction. *)
Fixpoint each {A : Type} (move : A -> state -> option state) (l : list A) (s : state) :=
  match l with
  | [] => Some s
  | x :: l' => match move x s with Some s' => each move l' s' | None => None end
  end.

Definition move_at (v : vertex) (s : state) : option state :=
  let here := neighbours (left s) v in
  match here with
  | [] | [_] => None
  | [_; _] => each (use v) here s
  | _ =>
      let two := neighbours (chosen s) v in
      if full two then each (remove v) (filter (fun w => negb (among w two)) here) s else Some s
  end.

(** Until nothing waits. Every edge is used or removed at most once, and two vertices wait
    after that: so [n + 2 * edges] is enough [fuel]. With less, moves would be missing. *)
Fixpoint settle (fuel : nat) (s : state) : option state :=
  match fuel, waiting s with
  | S fuel', v :: others =>
      let s' := {| left := left s; chosen := chosen s; far := far s; waiting := others |} in
      match move_at v s' with Some s'' => settle fuel' s'' | None => None end
  | _, _ => Some s
  end.

(** Some edges that are used, and some that are not. *)
Definition assumptions : Type := list (vertex * vertex) * list (vertex * vertex).

(** The state after assumptions and all forced moves. *)
Definition assume (fuel : nat) (a : assumptions) (s : state) : option state :=
  match each (fun e => use (fst e) (snd e)) (fst a) s with
  | Some s' =>
      match each (fun e => remove (fst e) (snd e)) (snd a) s' with
      | Some s'' => settle fuel s''
      | None => None
      end
  | None => None
  end.

End Moves.

Definition enough (Q : question) : nat := order Q + 2 * length (edges Q).

(** The state of the question itself: its needed edges are used. *)
Definition start (Q : question) : option state :=
  assume (last_vertex Q) (enough Q) (needed Q, []) {|
    left := adjacency Q;
    chosen := PositiveMap.empty _;
    far := PositiveMap.empty _;
    waiting := count_up (order Q) 1%positive
  |}.
