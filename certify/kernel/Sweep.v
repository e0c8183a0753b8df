(** * Kind [sweep]: the checker

    The vertices are swept in a given order. The edges of a cycle with a swept end form
    paths, its _pieces_; a vertex that no such edge has reached is a piece by itself. A
    state says what the two ends of every piece are, and no more: swept vertices and
    others that have two edges already are inside a piece and are not named. To sweep
    a vertex is to choose its edges to the vertices not swept yet, one by one. If no
    state is left at the end, there is no cycle (SweepSound.v). FORMAT.md, section 6,
    lists partners instead of pieces; the states are the same. *)

From Coq Require Import Bool List Arith PArith FMapPositive.
From Certify Require Import Statement Question Edges.
Import ListNotations.

(** The pieces, by their ends, the smaller one first, sorted; a vertex alone is its own
    other end. That they are sorted makes equal states equal lists; that is all. *)
Definition state := list (vertex * vertex).

Fixpoint place (p : vertex * vertex) (s : state) : state :=
  match s with
  | [] => [p]
  | q :: s' => if (fst p <? fst q)%positive then p :: s else q :: place p s'
  end.

(** [take u s]: the other end of the piece that ends in [u], and the other pieces. *)
Fixpoint take (u : vertex) (s : state) : option (vertex * state) :=
  match s with
  | [] => None
  | (a, b) :: s' =>
      if (a =? u)%positive then Some (b, s')
      else if (b =? u)%positive then Some (a, s')
      else match take u s' with
           | Some (c, rest) => Some (c, (a, b) :: rest)
           | None => None
           end
  end.

Section Choices.

(** The vertex that is swept, and whether all vertices have been reached. *)
Variable v : vertex.
Variable all_reached : bool.

(** The states after the choice among the edges from [v] to the vertices of [us], each with
    a mark that says whether the edge is needed. [hand] is the other end of the
    piece that ends in [v], which is kept apart from the others, [s]; [None] when [v] has
    two edges, as it must in the end. An edge to the other end closes a cycle. That is
    the one in question if it takes in everything, and then no piece is left: the
    empty state, which survives all later steps that need no further edge. *)
Fixpoint choices (hand : option vertex) (s : state) (us : list (vertex * bool)) : list state :=
  match us with
  | [] => match hand with None => [s] | Some _ => [] end
  | (u, must) :: us' =>
      let without := if must then [] else choices hand s us' in
      match hand with
      | None => without
      | Some a =>
          if (a =? u)%positive then
            match s with
            | [] => if all_reached then choices None [] us' ++ without else without
            | _ :: _ => without
            end
          else
            match take u s with
            | None => without
            | Some (b, rest) =>
                (if (a =? v)%positive then choices (Some b) rest us'
                 else choices None (place (ordered (a, b)) rest) us') ++ without
            end
      end
  end.

(** [fresh]: the vertices that are reached now. *)
Definition advance (fresh : list vertex) (us : list (vertex * bool)) (s : state) : list state :=
  let s' := fold_right (fun u => place (u, u)) s fresh in
  match take v s' with
  | Some (a, rest) => choices (Some a) rest us
  | None => choices None s' us
  end.

End Choices.

(** A collection of different states: the list, and a map to find them by a key. Two
    states may have the same key, as nothing depends on it but speed. *)
Definition collection : Type := PositiveMap.t (list state) * list state.

Fixpoint glue (a k : positive) : positive :=
  match a with
  | xH => k
  | xO a' => xO (glue a' k)
  | xI a' => xI (glue a' k)
  end.

Definition key (s : state) : positive :=
  fold_right (fun p k => glue (fst p) (glue (snd p) k)) xH s.

Fixpoint same (s t : state) : bool :=
  match s, t with
  | [], [] => true
  | p :: s', q :: t' => if pair_eqb p q then same s' t' else false
  | _, _ => false
  end.

Definition collect (c : collection) (s : state) : collection :=
  let (found, all) := c in
  let k := key s in
  match PositiveMap.find k found with
  | None => (PositiveMap.add k [s] found, s :: all)
  | Some l => if existsb (same s) l then c else (PositiveMap.add k (s :: l) found, s :: all)
  end.

(** How far the sweep is: the vertices that were reached, with [true] for those that were
    swept; how many were not reached; and the states. *)
Record progress := {
  marks : PositiveMap.t bool;
  unreached : nat;
  states : list state
}.

Definition swept (m : PositiveMap.t bool) (v : vertex) : bool :=
  match PositiveMap.find v m with Some b => b | None => false end.

Definition reached (m : PositiveMap.t bool) (v : vertex) : bool :=
  match PositiveMap.find v m with Some _ => true | None => false end.

(** The marks when [v] is swept and the vertices [ahead] are reached. *)
Definition marks_after (m : PositiveMap.t bool) (v : vertex) (ahead : list vertex) :=
  PositiveMap.add v true (fold_right (fun u m => PositiveMap.add u false m) m ahead).

Section Sweep.

(** The question, and its map of neighbours. *)
Variable Q : question.
Variable near : PositiveMap.t (list vertex).

Definition is_needed (v u : vertex) : bool := existsb (pair_eqb (ordered (v, u))) (needed Q).

Definition sweep_vertex (now : progress) (v : vertex) : progress :=
  let m := marks now in
  let ahead := filter (fun u => negb (swept m u)) (neighbours near v) in
  let fresh := filter (fun u => negb (reached m u)) (v :: ahead) in
  let others := unreached now - length fresh in
  let us := map (fun u => (u, is_needed v u)) ahead in
  let enter c s := fold_left collect (advance v (others =? 0) fresh us s) c in
  {| marks := marks_after m v ahead;
     unreached := others;
     states := snd (fold_left enter (states now) (PositiveMap.empty _, [])) |}.

(** Every vertex of the order must be one of the question, not swept before. *)
Fixpoint sweep (last : positive) (l : list vertex) (now : progress) : bool :=
  match l with
  | [] => match states now with [] => true | _ :: _ => false end
  | v :: rest =>
      if swept (marks now) v then false
      else if (v <=? last)%positive then sweep last rest (sweep_vertex now v)
      else false
  end.

Definition beginning : progress :=
  {| marks := PositiveMap.empty _; unreached := order Q; states := [[]] |}.

End Sweep.

(** The order names every vertex once: as many as there are, none twice. *)
Definition check_sweep (Q : question) (l : list vertex) : bool :=
  if (3 <=? order Q) && (length l =? order Q)
  then sweep Q (adjacency Q) (Pos.of_nat (order Q)) l (beginning Q)
  else false.

(** For tests: how many states there are after each step. The empty state is not counted: in
    FORMAT.md a cycle that is completed is no state. *)
Definition sweep_counts (Q : question) (l : list vertex) : list nat :=
  let near := adjacency Q in
  let count now :=
    length (filter (fun s : state => match s with [] => false | _ => true end) (states now)) in
  snd (fold_left
    (fun acc v => let now := sweep_vertex Q near (fst acc) v in (now, snd acc ++ [count now]))
    l (beginning Q, [])).
