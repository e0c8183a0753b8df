(** * From a query to the question in normal form

    FORMAT.md, section 4: the vertices are numbered 1, 2, ... in their order; a path
    becomes a cycle through one more vertex, the apex, joined to where it may end. The
    edges are computed here, from the rule, so no list of edges has to be believed. *)

From Coq Require Import Bool List PArith ZArith.
From Certify Require Import Statement Question Edges.
Import ListNotations.
Open Scope lazy_bool_scope.

(** Vertices can be compared. *)
Class Named (V : Type) := {
  same : V -> V -> bool;
  same_spec : forall u v, same u v = true <-> u = v
}.

#[export] Instance named_number : Named Z := { same := Z.eqb; same_spec := Z.eqb_eq }.

Lemma same_both : forall (A B : Type) (nameA : Named A) (nameB : Named B) (u v : A * B),
  (same (fst u) (fst v) &&& same (snd u) (snd v)) = true <-> u = v.
Proof.
  intros A B nameA nameB [a b] [a' b']. simpl.
  rewrite <- andb_lazy_alt, andb_true_iff, !same_spec. intuition congruence.
Qed.

#[export] Instance named_pair (A B : Type) (nameA : Named A) (nameB : Named B) : Named (A * B) :=
  { same u v := same (fst u) (fst v) &&& same (snd u) (snd v);
    same_spec := same_both A B nameA nameB }.

(** [Unfit]: a vertex is listed twice. [Missing]: an end or a required edge is not in the
    graph, so that there is no such path or cycle. [OneVertex]: the path of one vertex,
    which exists, but its cycle through the apex would have two vertices. *)
Inductive outcome :=
| Unfit
| Missing
| OneVertex
| Asks (q : question).

Section Normal.

Context {V : Type} {named : Named V}.
Variable Q : query V.

Fixpoint number (i : vertex) (l : list V) : list (vertex * V) :=
  match l with
  | [] => []
  | v :: l' => (i, v) :: number (Pos.succ i) l'
  end.

Definition numbered : list (vertex * V) := number 1%positive (vertices Q).

(** Whether a list holds an item; comparing stops at the first that is the same. *)
Fixpoint holds {A : Type} (test : A -> bool) (l : list A) : bool :=
  match l with
  | [] => false
  | x :: l' => test x ||| holds test l'
  end.

Fixpoint no_repeats (l : list V) : bool :=
  match l with
  | [] => true
  | v :: l' => negb (holds (same v) l') &&& no_repeats l'
  end.

(** [edge], computed. *)
Definition is_edge (u v : V) : bool :=
  adjacent Q u v
  &&& negb (holds (same (u, v)) (forbidden Q) ||| holds (same (v, u)) (forbidden Q)).

(** A rule is meant to say the same both ways; asked both ways, that need not be
    believed. *)
Definition meets (u v : V) : bool := is_edge u v ||| is_edge v u.

(** The edges from vertex [i] to later ones, put before [more]; then all edges, in
    sorted order. [close i u more] puts the edge from [i] to the apex before [more]. *)
Fixpoint row (i : vertex) (u : V) (later : list (vertex * V)) (more : list (vertex * vertex))
  : list (vertex * vertex) :=
  match later with
  | [] => more
  | (j, v) :: later' =>
      if meets u v then (i, j) :: row i u later' more else row i u later' more
  end.

Fixpoint rows (close : vertex -> V -> list (vertex * vertex) -> list (vertex * vertex))
    (l : list (vertex * V)) : list (vertex * vertex) :=
  match l with
  | [] => []
  | (i, u) :: later => row i u later (close i u (rows close later))
  end.

(** The number of a vertex, if it is there. *)
Definition place (u : V) : option vertex :=
  option_map fst (find (fun p => same u (snd p)) numbered).

Fixpoint collect {A B : Type} (f : A -> option B) (l : list A) : option (list B) :=
  match l with
  | [] => Some []
  | x :: l' =>
      match f x, collect f l' with
      | Some y, Some ys => Some (y :: ys)
      | _, _ => None
      end
  end.

Definition place_pair (e : V * V) : option (vertex * vertex) :=
  match place (fst e), place (snd e) with
  | Some i, Some j => Some (ordered (i, j))
  | _, _ => None
  end.

(** The question with these edges, some of which are wanted. *)
Definition ask (n : nat) (all wanted : list (vertex * vertex)) : outcome :=
  if forallb (fun e => holds (pair_eqb e) all) wanted
  then Asks {| order := n; edges := all;
               needed := filter (fun e => holds (pair_eqb e) wanted) all |}
  else Missing.

Definition normal_cycle : outcome :=
  if no_repeats (vertices Q) then
    match collect place_pair (required Q) with
    | Some wanted => ask (length (vertices Q)) (rows (fun _ _ more => more) numbered) wanted
    | None => Missing
    end
  else Unfit.

(** With two ends given, the apex is joined to these alone. *)
Definition may_end (u : V) : bool :=
  match ends Q with
  | [_; _] => holds (same u) (ends Q)
  | _ => true
  end.

Definition join_apex (apex i : vertex) (u : V) (more : list (vertex * vertex)) :=
  if may_end u then (i, apex) :: more else more.

Definition normal_path : outcome :=
  let n := length (vertices Q) in
  let apex := Pos.of_succ_nat n in
  if no_repeats (vertices Q) then
    match collect place_pair (required Q), collect place (ends Q) with
    | Some wanted, Some tips =>
        match ask (S n) (rows (join_apex apex) numbered)
                  (map (fun i => (i, apex)) tips ++ wanted) with
        | Asks q => match n with 1 => OneVertex | _ => Asks q end
        | other => other
        end
    | _, _ => Missing
    end
  else Unfit.

End Normal.
