(** * Exactly two of some variables

    The clauses of a degree: exactly two edges at a vertex are used. *)

From Coq Require Import Bool List PArith Arith Lia.
From Certify Require Import Statement Question Facts Propagation Variables.
Import ListNotations.

Implicit Types (s next : variable) (a b c : variable -> bool) (l : clause) (e : list variable)
  (d : clause) (k : nat).

(** Two of a few: without any one of them there is still one, and there are not three. *)
Fixpoint all_but_one (l : clause) : list clause :=
  match l with
  | [] => []
  | x :: rest => rest :: map (cons x) (all_but_one rest)
  end.

Fixpoint pairs (l : clause) : list clause :=
  match l with
  | [] => []
  | x :: rest => map (fun y => [x; y]) rest ++ pairs rest
  end.

Fixpoint triples (l : clause) : list clause :=
  match l with
  | [] => []
  | x :: rest => map (cons x) (pairs rest) ++ triples rest
  end.

Definition two_of_few (e : list variable) : list clause :=
  all_but_one (map xO e) ++ triples (map xI e).

(** Two of many, counted along the list: [s] says that one of those before [x] is true,
    [t] that two are (nothing, if there was but one so far), and [t'] the same with [x]. *)
Definition second (s : variable) (t : option variable) (x t' : variable) : list clause :=
  match t with
  | None => [[t'~1; s~0]; [t'~1; x~0]; [s~1; x~1; t'~0]]
  | Some t => [[t'~1; t~0; s~0]; [t'~1; t~0; x~0]; [t~1; t'~0]; [t~1; x~1]; [s~1; x~1; t'~0]]
  end%positive.

Definition first (s x s' : variable) : list clause :=
  [[s~1; s'~0]; [x~1; s'~0]; [s'~1; s~0; x~0]]%positive.

Fixpoint two_of_many (s : variable) (t : option variable) (e : list variable)
    (next : variable) : formula :=
  match e with
  | [] => ([], next)
  | [x] => (second s t x next ++ [[next~0]], Pos.succ next)
  | x :: rest =>
      let s' := next in
      let t' := Pos.succ next in
      let more := two_of_many s' (Some t') rest (Pos.succ t') in
      ((first s x s' ++ second s t x t') ++ fst more, snd more)
  end%positive.

Definition most_direct_degree := 6.

Definition exactly_two (e : list variable) (next : variable) : option formula :=
  match e with
  | x :: (_ :: _) as rest =>
      Some (if length e <=? most_direct_degree then (two_of_few e, next)
            else two_of_many x None rest next)
  | _ => None
  end.

(** ** Why they hold when exactly two are true *)

Lemma satisfied_cons : forall c x d, satisfied c (x :: d) <-> holds c x = true \/ satisfied c d.
Proof.
  intros c x d. unfold satisfied. split.
  - intros (y & [<- | listed] & true_y); [now left | right; now exists y].
  - intros [true_x | (y & listed & true_y)]; [exists x | exists y]; cbn; tauto.
Qed.

Lemma count_cons : forall (A : Type) (p : A -> bool) y m,
  count p (y :: m) = Nat.b2n (p y) + count p m.
Proof. intros A p y m. unfold count. cbn. now destruct (p y). Qed.

Lemma one_satisfies : forall c d, 1 <= count (holds c) d -> satisfied c d.
Proof.
  intros c. induction d as [| x d IH]; [cbn; lia |]. rewrite count_cons, satisfied_cons.
  destruct (holds c x); [now left |]. intros some. right. now apply IH.
Qed.

Lemma two_satisfy : forall c l, 2 <= count (holds c) l ->
  forall d, In d (all_but_one l) -> satisfied c d.
Proof.
  intros c. induction l as [| x l IH]; intros two d listed; [easy |]. rewrite count_cons in two.
  destruct listed as [<- | listed].
  - apply one_satisfies. destruct (holds c x); cbn [Nat.b2n] in two; lia.
  - apply in_map_iff in listed as (d' & <- & listed). apply satisfied_cons.
    destruct (holds c x); [now left |]. right. now apply IH.
Qed.

Definition fails (c : variable -> bool) (x : literal) : bool := negb (holds c x).

Lemma pairs_hold : forall c l, count (fails c) l <= 1 ->
  forall d, In d (pairs l) -> satisfied c d.
Proof.
  intros c. induction l as [| x l IH]; intros one d listed; [easy |]. rewrite count_cons in one.
  unfold fails at 1 in one. cbn [pairs] in listed. apply in_app_or in listed as [listed | listed].
  - apply in_map_iff in listed as (y & <- & listed). rewrite !satisfied_cons.
    destruct (holds c x); [now left |]. right. left. cbn [Nat.b2n negb] in one.
    apply not_false_iff_true. intros false_y.
    assert (In y (filter (fails c) l)) as failing
      by (apply filter_In; unfold fails; now rewrite false_y).
    unfold count in one. destruct (filter (fails c) l); [easy | cbn in one; lia].
  - apply IH; [| exact listed]. lia.
Qed.

Lemma triples_hold : forall c l, count (fails c) l <= 2 ->
  forall d, In d (triples l) -> satisfied c d.
Proof.
  intros c. induction l as [| x l IH]; intros two d listed; [easy |]. rewrite count_cons in two.
  unfold fails at 1 in two. cbn [triples] in listed. apply in_app_or in listed as [listed | listed].
  - apply in_map_iff in listed as (d' & <- & listed). apply satisfied_cons.
    destruct (holds c x); [now left |]. right. cbn [Nat.b2n negb] in two.
    apply (pairs_hold c l); [lia | exact listed].
  - apply IH; [| exact listed]. lia.
Qed.

Lemma two_of_few_hold : forall c e, count c e = 2 ->
  forall d, In d (two_of_few e) -> satisfied c d.
Proof.
  intros c e two d listed. apply in_app_or in listed as [listed | listed].
  - apply (two_satisfy c (map xO e)); [| exact listed].
    rewrite count_map. change (2 <= count c e). now rewrite two.
  - apply (triples_hold c (map xI e)); [| exact listed].
    rewrite count_map. unfold count, fails. cbn [holds].
    rewrite (filter_ext _ c) by (intros x; apply negb_involutive).
    change (count c e <= 2). now rewrite two.
Qed.

(** [b2n] counts a variable; [k] is how many are true among those before. *)
Lemma second_holds : forall c s t x t' k,
  c s = (1 <=? k) ->
  match t with None => k <= 1 | Some t => c t = (2 <=? k) end ->
  k + Nat.b2n (c x) <= 2 ->
  c t' = (2 <=? k + Nat.b2n (c x)) ->
  forall d, In d (second s t x t') -> satisfied c d.
Proof.
  intros c s t x t' k one two most both d listed. apply existsb_exists.
  destruct t as [t |]; cbn [second In] in listed;
    repeat (destruct listed as [<- | listed]); try easy; cbn [existsb holds];
    rewrite ?both, ?one; try rewrite two; destruct (c x); cbn in *;
    destruct k as [| [| [| k]]]; cbn in *; easy || lia.
Qed.

Lemma first_holds : forall c s x s' k,
  c s = (1 <=? k) -> c s' = (1 <=? k + Nat.b2n (c x)) ->
  forall d, In d (first s x s') -> satisfied c d.
Proof.
  intros c s x s' k one both d listed. apply existsb_exists.
  repeat (destruct listed as [<- | listed]); try easy; cbn [existsb holds];
    rewrite both, ?one; destruct (c x); destruct k as [| k]; cbn; try easy.
Qed.

Lemma count_ext : forall a b l, (forall x, In x l -> a x = b x) -> count a l = count b l.
Proof. intros a b l same. unfold count. f_equal. now apply filter_ext_in. Qed.

Lemma two_of_many_possible : forall e s t next a k, e <> [] ->
  (s < next)%positive -> (forall u, t = Some u -> (u < next)%positive) ->
  (forall x, In x e -> (x < next)%positive) ->
  a s = (1 <=? k) ->
  match t with None => k <= 1 | Some t => a t = (2 <=? k) end ->
  k + count a e = 2 ->
  possible next a (two_of_many s t e next).
Proof.
  induction e as [| x e IH];
    intros s t next a k some s_below t_below e_below one two total; [easy |].
  assert (x < next)%positive as x_below by (apply e_below; now left).
  assert (forall c, extends next a c ->
            c s = (1 <=? k) /\ match t with None => k <= 1 | Some t => c t = (2 <=? k) end) as old.
  { intros c ac. rewrite (ac s s_below). split; [exact one |].
    destruct t as [t |]; [| exact two]. now rewrite (ac t (t_below t eq_refl)). }
  rewrite count_cons in total. destruct e as [| y e].
  - cbn [count filter length] in total. split; [cbn; lia |].
    exists (assign next true a). split; [apply assign_extends |]. intros c bc d listed.
    assert (extends next a c) as ac
      by (apply (extends_trans next (Pos.succ next) a (assign next true a));
          [lia | apply assign_extends | exact bc]).
    assert (c next = true) as true_t by (rewrite bc by (cbn; lia); apply assign_same).
    destruct (old c ac) as [one_c two_c]. apply in_app_or in listed as [listed | [<- | []]].
    + apply (second_holds c s t x next k one_c two_c); [| | exact listed].
      * rewrite (ac x x_below). unfold count in total. cbn in total. lia.
      * rewrite true_t, (ac x x_below). symmetry. apply Nat.leb_le.
        unfold count in total. cbn in total. lia.
    + apply satisfied_cons. left. exact true_t.
  - set (now := k + Nat.b2n (a x)). cbn [two_of_many]. cbv zeta.
    pose (b := assign (Pos.succ next) (2 <=? now) (assign next (1 <=? now) a)).
    assert (extends next a b) as ab.
    { intros z below. unfold b. rewrite assign_extends by lia. now apply assign_extends. }
    assert (b next = (1 <=? now)) as b_s
      by (unfold b; rewrite assign_extends by lia; apply assign_same).
    assert (b (Pos.succ next) = (2 <=? now)) as b_t by apply assign_same.
    apply (possible_app next a (Pos.succ (Pos.succ next)) b); [lia | exact ab | |].
    + intros c bc d listed.
      assert (extends next a c) as ac
        by (apply (extends_trans next (Pos.succ (Pos.succ next)) a b); [lia | exact ab | exact bc]).
      destruct (old c ac) as [one_c two_c].
      assert (c next = (1 <=? k + Nat.b2n (c x))) as c_s by (rewrite bc, (ac x) by lia; exact b_s).
      assert (c (Pos.succ next) = (2 <=? k + Nat.b2n (c x))) as c_t
        by (rewrite bc, (ac x) by lia; exact b_t).
      apply in_app_or in listed as [listed | listed].
      * exact (first_holds c s x next k one_c c_s d listed).
      * apply (second_holds c s t x (Pos.succ next) k one_c two_c); [| exact c_t | exact listed].
        rewrite (ac x x_below). lia.
    + apply (IH next (Some (Pos.succ next)) _ b now); [easy | lia | | | exact b_s | exact b_t |].
      * intros u [= <-]. lia.
      * intros z listed. assert (z < next)%positive by (apply e_below; now right). lia.
      * rewrite <- total. unfold now. rewrite <- Nat.add_assoc. do 2 f_equal.
        apply count_ext. intros z listed. apply ab, e_below. now right.
Qed.

Lemma exactly_two_possible : forall e next a f, exactly_two e next = Some f ->
  (forall x, In x e -> (x < next)%positive) -> count a e = 2 -> possible next a f.
Proof.
  intros e next a f result below two.
  assert (few : possible next a (two_of_few e, next)).
  { apply possible_now. intros c ac d listed. apply (two_of_few_hold c e); [| exact listed].
    rewrite <- two. apply count_ext. intros x x_in. apply ac. now apply below. }
  destruct e as [| x [| y e]]; try easy. rewrite count_cons in two.
  assert (f = if length (x :: y :: e) <=? most_direct_degree then (two_of_few (x :: y :: e), next)
              else two_of_many x None (y :: e) next) as -> by now injection result.
  destruct (length _ <=? most_direct_degree); [exact few |].
  apply (two_of_many_possible (y :: e) x None next a (Nat.b2n (a x))); try easy.
  - apply below. now left.
  - intros z listed. apply below. now right.
  - now destruct (a x).
  - destruct (a x); cbn; lia.
Qed.
